interface Cited { workspaceName: string, createdAt: string, title: string, n: number, licence: string, invented: boolean, run: { resultSha256: string } }

/** How an edition is cited: who, when, what, which edition, where, and the hash of its result. */
export function citation(edition: Cited, address: string): string {
  const title = edition.title.trim().replace(/\.+$/, '')
  return [
    `${edition.workspaceName} (${edition.createdAt.slice(0, 4)}): ${title}. Edition ${edition.n}, ${edition.createdAt.slice(0, 10)}.`,
    `${address}.`,
    `Result SHA-256 ${edition.run.resultSha256.slice(0, 16)}….`,
    edition.licence.trim() ? `Licence: ${edition.licence.trim().replace(/\.+$/, '')}.` : '',
    edition.invented && !/invented/i.test(edition.licence) ? 'Invented data.' : '',
  ].filter(Boolean).join(' ')
}
