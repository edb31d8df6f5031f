import jwt from 'jsonwebtoken'
import { z } from 'zod'

const ISSUER = 'scruple'
const AUDIENCE = 'scruple-api'
const LIFE_SECONDS = 600

const Claims = z.object({ sub: z.uuid(), sid: z.uuid() })

/** A token for ten minutes; it names the session, and every request still asks the database whether that session lives. */
export function issueAccessToken(keys: readonly string[], { userId, sessionId }: { userId: string; sessionId: string }): string {
  const [key] = keys
  if (key === undefined) throw new Error('No access token key is configured.')
  return jwt.sign({ sid: sessionId }, key, {
    algorithm: 'HS256',
    subject: userId,
    issuer: ISSUER,
    audience: AUDIENCE,
    expiresIn: LIFE_SECONDS,
  })
}

/** The session that a token names, or undefined when no key of ours made it or its time is over. */
export function readAccessToken(keys: readonly string[], token: string): { userId: string; sessionId: string } | undefined {
  for (const key of keys) {
    try {
      const claims = Claims.parse(jwt.verify(token, key, { algorithms: ['HS256'], issuer: ISSUER, audience: AUDIENCE }))
      return { userId: claims.sub, sessionId: claims.sid }
    } catch (error) {
      if (!(error instanceof jwt.JsonWebTokenError) && !(error instanceof z.ZodError)) throw error
    }
  }
  return undefined
}
