import { createHash } from 'node:crypto'
import { UniqueConstraintError } from 'sequelize'
import { inTransaction } from '../database/in-transaction.ts'
import { IdempotencyKeyMissingError, InvalidFieldError } from '../errors.ts'
import { IdempotencyKey } from '../models/idempotency-key.ts'
import type { Actor } from './actor.ts'

const KEY_FORM = /^[\x21-\x7e]{8,80}$/

/** Refuses a missing or malformed key. */
export function requireIdempotencyKey(header: string | undefined): string {
  if (header === undefined || !KEY_FORM.test(header)) {
    throw new IdempotencyKeyMissingError()
  }
  return header
}

export interface KeyedRequest {
  actor: Actor
  route: string
  key: string
  body: unknown
}

/**
 * Runs the work once for a key. The key row is written in the same transaction as the effect, so either both are
 * there or neither; a retry gets the first answer, another body under the same key is refused.
 * Of two at the same moment the second waits on the unique key and then reads the first one's answer.
 */
export async function onceForKey({ actor, route, key, body }: KeyedRequest, work: () => Promise<unknown>): Promise<unknown> {
  const where = { userId: actor.userId, route, idempotencyKey: key }
  const bodyHash = createHash('sha256')
    .update(JSON.stringify(body ?? null))
    .digest('hex')
  const answered = await IdempotencyKey.findOne({ where })
  if (answered) return firstAnswer(answered, bodyHash)
  try {
    return await inTransaction(async () => {
      const row = await IdempotencyKey.create({ ...where, bodyHash, createdAt: new Date() })
      const answer = await work()
      if (typeof answer === 'object') await row.update({ answer })
      return answer
    })
  } catch (error) {
    if (!(error instanceof UniqueConstraintError)) throw error
    const first = await IdempotencyKey.findOne({ where })
    if (!first) throw error
    return firstAnswer(first, bodyHash)
  }
}

function firstAnswer(row: IdempotencyKey, bodyHash: string): unknown {
  if (row.bodyHash !== bodyHash) {
    throw new InvalidFieldError('/header/Idempotency-Key', 'This Idempotency-Key was used for a different request. Nothing was recorded.')
  }
  return row.answer
}
