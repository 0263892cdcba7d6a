import { createHash, randomBytes } from 'node:crypto'

/** A token for a link in a mail: 256 random bits, of which only the SHA-256 is kept. */
export function mintToken(): { token: string; sha256: Buffer } {
  const token = randomBytes(32).toString('base64url')
  return { token, sha256: tokenDigest(token) }
}

export const tokenDigest = (token: string): Buffer => createHash('sha256').update(token).digest()
