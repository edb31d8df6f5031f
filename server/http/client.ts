/** Where a request came from, and the one cookie that Scruple sets. */
export interface Client {
  readonly address: string
  readonly device: string
  readonly requestId: string
  /** The refresh token that came in the cookie, if any. */
  readonly refreshToken: string | undefined
  /** The request carries the header that only our own page can send (no simple cross-site request can). */
  readonly isOwnPage: boolean
  setRefreshToken(token: string, expiresAt: Date): void
  clearRefreshToken(): void
  /** Event streams: takes over the connection. */
  openStream(): EventStream
}

/** A server-sent event stream that stays open until one side closes it. */
export interface EventStream {
  send(event: { id?: string; name: string; data: unknown }): void
  close(): void
  readonly lastEventId: string | undefined
}
