import { AsyncLocalStorage } from 'node:async_hooks'
import { Sequelize, Transaction } from 'sequelize'

type Values = Map<string, unknown>
const storage = new AsyncLocalStorage<Values>()

/**
 * The continuation-local namespace that Sequelize asks for, on Node's own AsyncLocalStorage: every query made inside
 * a transaction's callback belongs to that transaction without being told, so none can slip outside it.
 */
const namespace = {
  run(callback: (values: Values) => void): Values {
    const values: Values = new Map(storage.getStore())
    storage.run(values, () => callback(values))
    return values
  },
  get: (name: string): unknown => storage.getStore()?.get(name),
  set: (name: string, value: unknown): void => void storage.getStore()?.set(name, value),
  bind: <T>(callback: T): T => callback,
}

Sequelize.useCLS(namespace)

/** The transaction that the caller runs in, if any. */
export function currentTransaction(): Transaction | undefined {
  const transaction = namespace.get('transaction')
  return transaction instanceof Transaction ? transaction : undefined
}

/**
 * Runs work that must stay even when the surrounding transaction is rolled back: counting a failed pass-phrase, for
 * one. It must not touch rows that the transaction has locked.
 */
export function outsideTransaction<T>(work: () => Promise<T>): Promise<T> {
  return storage.run(new Map(), work)
}
