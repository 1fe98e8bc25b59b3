import { createHash, randomBytes } from 'node:crypto'

/** What stands for a link in the database: who reads it can follow none. */
export function hashToken(token: string): string {
  return createHash('sha256').update(token).digest('hex')
}

/** The token goes into a mail and nowhere else; only its hash is kept. */
export function makeToken(): { token: string; tokenHash: string } {
  const token = randomBytes(32).toString('base64url')
  return { token, tokenHash: hashToken(token) }
}
