import { DatabaseError, type Transaction } from 'sequelize'
import { database } from './database.ts'
import { currentTransaction } from './transaction-scope.ts'

const MAX_TRIES = 5
const FIRST_WAIT_MS = 50
/** Deadlock, lock wait time-out, row changed since the snapshot, node not ready: the whole unit of work may be tried again. */
const RETRYABLE_ERRORS = new Set([1213, 1205, 1020, 1047])

function errorNumber(error: unknown): number | undefined {
  if (!(error instanceof DatabaseError)) return undefined
  const { original } = error
  return 'errno' in original && typeof original.errno === 'number' ? original.errno : undefined
}

/**
 * Runs one unit of work: all of it or nothing. Inside another unit it joins that one. Every query in the callback
 * belongs to the transaction (see transaction-scope.ts). Tried again as a whole where the database asks for it
 * (requirement F9), so the callback must have no effect outside the database.
 */
export async function inTransaction<T>(work: (transaction: Transaction) => Promise<T>): Promise<T> {
  const outer = currentTransaction()
  if (outer) return work(outer)
  for (let attempt = 1; ; attempt++) {
    try {
      return await database().transaction(work)
    } catch (error) {
      if (attempt >= MAX_TRIES || !RETRYABLE_ERRORS.has(errorNumber(error) ?? 0)) throw error
      const waitMs = FIRST_WAIT_MS * 2 ** (attempt - 1) * (0.5 + Math.random())
      await new Promise((resolve) => setTimeout(resolve, waitMs))
    }
  }
}
