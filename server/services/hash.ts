import { createHash, randomBytes } from 'node:crypto'
import canonicalize from 'canonicalize'

export function sha256Hex(data: string | Uint8Array): string {
  return createHash('sha256').update(data).digest('hex')
}

/** Canonical JSON (RFC 8785): the same value always gives the same bytes. */
export function canonicalJson(value: unknown): string {
  const text = canonicalize(value)
  if (text === undefined) throw new TypeError('canonicalJson: the value has no JSON form')
  return text
}

export function secretToken(): string {
  return randomBytes(32).toString('base64url')
}
