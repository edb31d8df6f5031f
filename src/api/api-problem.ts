/** One thing wrong with what was sent: where, and what was found and expected. */
export interface ProblemIssue {
  pointer: string
  message: string
  row?: number
  column?: string
  found?: string
  expected?: string
}

/** A problem document (RFC 9457) as an error; `slug` is the last part of its type and stays the same over versions. */
export class ApiProblem extends Error {
  override readonly name = 'ApiProblem'
  readonly slug: string
  readonly status: number
  readonly issues: readonly ProblemIssue[]
  readonly requestId: string | undefined
  constructor(readonly facts: Readonly<Record<string, unknown>>) {
    super(typeof facts['title'] === 'string' ? facts['title'] : 'Something failed.')
    this.slug = typeof facts['type'] === 'string' ? (facts['type'].split('/').pop() ?? '') : 'unknown'
    this.status = typeof facts['status'] === 'number' ? facts['status'] : 0
    this.issues = Array.isArray(facts['issues']) ? facts['issues'].filter(isIssue) : []
    this.requestId = typeof facts['requestId'] === 'string' ? facts['requestId'] : undefined
  }

  /** The message for one field, by its JSON pointer. */
  messageFor(pointer: string): string | undefined {
    return this.issues.find((issue) => issue.pointer === pointer)?.message
  }
}

function isIssue(value: unknown): value is ProblemIssue {
  return typeof value === 'object' && value !== null && 'pointer' in value && 'message' in value
}

/** The network or the server is out of reach; nothing is known of what was sent. */
export function offlineProblem(): ApiProblem {
  return new ApiProblem({
    type: '/problems/offline',
    title: 'The server cannot be reached. What you typed is kept here; try again.',
    status: 0,
  })
}
