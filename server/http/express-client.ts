import type { Request, Response } from 'express'
import type { Client } from './client.ts'
import { openEventStream } from './express-event-stream.ts'

/** The `__Host-` prefix makes browsers refuse the cookie unless it is Secure, for this host alone and for every path. */
export const REFRESH_COOKIE = '__Host-scruple-refresh'

/** What handlers may know and do of the HTTP exchange. */
export function clientOf(request: Request, response: Response): Client {
  const cookies: unknown = request.cookies
  const token = typeof cookies === 'object' && cookies !== null && REFRESH_COOKIE in cookies ? cookies[REFRESH_COOKIE] : undefined
  return {
    address: request.ip ?? 'unknown',
    device: (request.get('user-agent') ?? 'unknown device').slice(0, 200),
    requestId: String(request.id),
    refreshToken: typeof token === 'string' ? token : undefined,
    isOwnPage: request.get('x-scruple-refresh') === '1',
    setRefreshToken: (value, expires) =>
      void response.cookie(REFRESH_COOKIE, value, { httpOnly: true, secure: true, sameSite: 'strict', path: '/', expires }),
    clearRefreshToken: () => void response.clearCookie(REFRESH_COOKIE, { httpOnly: true, secure: true, sameSite: 'strict', path: '/' }),
    openStream: () => openEventStream(request, response),
  }
}
