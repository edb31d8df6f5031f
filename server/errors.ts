import type { Permission } from '#shared/permissions.ts'

/** One thing wrong with a request: where (a JSON pointer, or a row), what was found, what was expected. */
export interface Issue {
  pointer: string
  message: string
  row?: number
  column?: string
  found?: string
  expected?: string
}

/** Every refusal that Scruple makes on purpose. Status and slug are promises to clients, the sentence is for a person, the facts for a machine. */
export abstract class ScrupleError extends Error {
  abstract readonly status: number
  abstract readonly slug: string
  constructor(
    message: string,
    readonly facts: Readonly<Record<string, unknown>> = {},
  ) {
    super(message)
    this.name = new.target.name
  }
}

export class SignedOutError extends ScrupleError {
  override readonly status = 401
  override readonly slug = 'signed-out'
  constructor(message = 'You are not signed in, or your session has ended. Sign in again.') {
    super(message)
  }
}

export class SignInRefusedError extends ScrupleError {
  override readonly status = 401
  override readonly slug = 'sign-in-refused'
  constructor() {
    super('The e-mail address and pass-phrase do not match an active account.')
  }
}

export class TooManyAttemptsError extends ScrupleError {
  override readonly status = 429
  override readonly slug = 'too-many-attempts'
  constructor(readonly retryAfterSeconds: number) {
    super(`Too many attempts. Try again in ${retryAfterSeconds} seconds.`, { retryAfterSeconds })
  }
}

export class ForbiddenError extends ScrupleError {
  override readonly status = 403
  override readonly slug = 'not-permitted'
  constructor(permission: Permission | 'own-record') {
    super('Your role at this site does not permit this.', { permission })
  }
}

export class NotFoundError extends ScrupleError {
  override readonly status = 404
  override readonly slug = 'not-found'
  constructor(kind: string, id: string) {
    super(`There is no ${kind} ${id} here, or you may not see it.`, { kind, id })
  }
}

/** The request was understood, but a field holds something that cannot be. */
export class InvalidFieldError extends ScrupleError {
  override readonly status = 422
  override readonly slug = 'invalid-request'
  constructor(pointer: string, message: string) {
    super('The request does not fit its schema.', { issues: [{ pointer, message } satisfies Issue] })
  }
}

/** A state that does not allow the step: the sentence says which state and what would be needed. */
export class ConflictError extends ScrupleError {
  override readonly status = 409
  constructor(
    override readonly slug: string,
    message: string,
    facts: Readonly<Record<string, unknown>> = {},
  ) {
    super(message, facts)
  }
}

/** Somebody else saved this record meanwhile; both versions go back so that a person can decide. */
export class StaleVersionError extends ScrupleError {
  override readonly status = 409
  override readonly slug = 'stale-version'
  constructor(kind: string, facts: { yourVersion: number; currentVersion: number; current: unknown }) {
    super(`This ${kind} was changed by somebody else since you opened it. Nothing was saved.`, facts)
  }
}

export class PayloadTooLargeError extends ScrupleError {
  override readonly status = 413
  override readonly slug = 'too-large'
  constructor(what: string, limit: string) {
    super(`${what} is larger than the limit of ${limit}. Nothing was recorded.`)
  }
}

export class UnavailableError extends ScrupleError {
  override readonly status = 503
  override readonly slug = 'unavailable'
  constructor(
    message = 'The database does not answer at the moment. Nothing is lost: try again in a few seconds.',
    readonly retryAfterSeconds = 2,
  ) {
    super(message)
  }
}

/** Without a key a retry could record something twice. */
export class IdempotencyKeyMissingError extends ScrupleError {
  override readonly status = 400
  override readonly slug = 'idempotency-key-missing'
  constructor() {
    super('Send an Idempotency-Key header of 8 to 80 visible characters, the same for each retry of this request.')
  }
}

/** A balance file that holds anything wrong is refused whole; every row at fault is named. */
export class BalanceFileRefusedError extends ScrupleError {
  override readonly status = 422
  override readonly slug = 'balance-file-refused'
  constructor(refused: {
    message: string
    total: number
    problems: readonly { line: number; column: string; found: string; expected: string; message: string }[]
  }) {
    const issues = refused.problems.map(({ line, column, found, expected, message }): Issue => ({
      pointer: `/rows/${line}`,
      row: line,
      column,
      found,
      expected,
      message,
    }))
    super(refused.message, { total: refused.total, issues })
  }
}
