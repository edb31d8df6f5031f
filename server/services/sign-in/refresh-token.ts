import { createHash, randomBytes, timingSafeEqual } from 'node:crypto'

const FORM = /^([0-9a-f-]{36})\.([A-Za-z0-9_-]{43})$/

/** An opaque token: the session it belongs to and 256 random bits. Only the hash is stored. */
export function newRefreshToken(sessionId: string): { token: string; hash: string } {
  const token = `${sessionId}.${randomBytes(32).toString('base64url')}`
  return { token, hash: refreshTokenHash(token) }
}

export function refreshTokenHash(token: string): string {
  return createHash('sha256').update(`scruple/refresh/1\n${token}`).digest('hex')
}

/** The session that a token claims to belong to. */
export function sessionOfToken(token: string): string | undefined {
  return FORM.exec(token)?.[1]
}

export function isSameHash(a: string, b: string | null): boolean {
  return b !== null && a.length === b.length && timingSafeEqual(Buffer.from(a), Buffer.from(b))
}
