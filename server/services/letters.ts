import { formatInstant } from '#shared/format/dates'
import type { Letter } from './mail'

const texts = {
  member: {
    subject: 'You are asked into a workspace of Counterpoise',
    lines: (what: string) => ['Somebody asked you in:', what, 'To accept, open this link. It works once.'],
  },
  password: {
    subject: 'A new password for Counterpoise',
    lines: () => ['Somebody, most likely you, asked for a new password for this address.', 'To set one, open this link. It works once, and ends all sessions of the account. If it was not you, do nothing.'],
  },
}

/** A letter that carries a one-time link. */
export function linkLetter(kind: keyof typeof texts, recipient: string, link: string, expiresAt: string, what = ''): Letter {
  const { subject, lines } = texts[kind]
  return { recipient, subject, text: `${[...lines(what), link, `The link ends ${formatInstant(expiresAt)}.`].join('\n\n')}\n` }
}
