import { BaseError, ConnectionError, TimeoutError, UniqueConstraintError } from 'sequelize'
import type { z } from 'zod'
import { StatisticsError } from '#shared/statistics/errors.ts'
import { ScrupleError, type Issue } from '../errors.ts'
import { RequestDoesNotFitError } from './endpoint.ts'

/** A problem document (RFC 9457). */
export interface Problem {
  type: string
  title: string
  status: number
  [fact: string]: unknown
}

const UNAVAILABLE: Problem = {
  type: '/problems/unavailable',
  title: 'The database does not answer at the moment. Nothing is lost: try again in a few seconds.',
  status: 503,
  retryAfterSeconds: 2,
}

function shown(value: unknown): string {
  if (value === undefined) return 'nothing'
  const text = typeof value === 'string' ? `“${value}”` : JSON.stringify(value)
  return text.length > 60 ? `${text.slice(0, 57)}…` : text
}

function toIssue(part: string, issue: z.core.$ZodIssue): Issue {
  const path = issue.path.map(String).join('/')
  const pointer = part === 'body' ? `/${path}` : `/${part}/${path}`
  const found = issue.code === 'unrecognized_keys' ? `unknown fields ${issue.keys.join(', ')}` : shown(issue.input)
  return { pointer, message: issue.message, found }
}

/** body-parser and multer refuse with plain errors that carry a status; their words are for programmers. */
function fromParser(error: Error & { status: number }): Problem | undefined {
  if (error.status === 413)
    return { type: '/problems/too-large', title: 'The request is larger than this endpoint takes. Nothing was recorded.', status: 413 }
  if (error.status === 415)
    return { type: '/problems/unsupported-media', title: 'Send JSON with the content type application/json.', status: 415 }
  if (error.status >= 400 && error.status < 500)
    return { type: '/problems/malformed-request', title: 'The request body is not valid JSON.', status: 400 }
  return undefined
}

const hasStatus = (error: Error): error is Error & { status: number } => 'status' in error && typeof error.status === 'number'

function isOutOfReach(error: unknown): boolean {
  if (error instanceof ConnectionError || error instanceof TimeoutError) return true
  if (!(error instanceof BaseError) || !('original' in error)) return false
  const { original } = error
  return original instanceof Error && /SOCKET|ECONN|CONNECTION|SHUTDOWN/.test('code' in original ? String(original.code) : '')
}

/** The only place where an error becomes a response; an unknown one leaks nothing. */
export function toProblem(error: unknown): Problem {
  if (error instanceof ScrupleError) return { ...error.facts, type: `/problems/${error.slug}`, title: error.message, status: error.status }
  if (error instanceof StatisticsError) return { type: `/problems/${error.code}`, title: error.message, status: 422, at: error.argument }
  if (error instanceof RequestDoesNotFitError) {
    const issues = error.zodError.issues.map((issue) => toIssue(error.part, issue))
    return { type: '/problems/invalid-request', title: 'The request does not fit its schema.', status: 422, issues }
  }
  if (isOutOfReach(error)) return UNAVAILABLE
  if (error instanceof UniqueConstraintError) {
    return {
      type: '/problems/already-there',
      title: 'A record with the same identification already exists. Nothing was recorded.',
      status: 409,
    }
  }
  const fromBodyParser = error instanceof Error && hasStatus(error) ? fromParser(error) : undefined
  return fromBodyParser ?? { type: '/problems/internal', title: 'Something failed on our side. Nothing was recorded.', status: 500 }
}
