import { Worker } from 'node:worker_threads'
import { UnavailableError } from '../errors.ts'

export type PassPhraseTask = { kind: 'hash'; text: string; cost: number } | { kind: 'compare'; text: string; hash: string }

/** More people than this signing in within a few seconds are asked to try again, so that weighing never waits for them. */
const MAX_WAITING = 100

/** One thread that does nothing but bcrypt, so that a third of a second of arithmetic never holds up a weight. */
class PassPhrasePool {
  #worker: Worker | undefined
  #lastId = 0
  readonly #waiting = new Map<number, { resolve: (result: unknown) => void; reject: (error: Error) => void }>()

  hash(text: string, cost: number): Promise<string> {
    return this.#run({ kind: 'hash', text, cost }).then(String)
  }

  compare(text: string, hash: string): Promise<boolean> {
    return this.#run({ kind: 'compare', text, hash }).then((result) => result === true)
  }

  async close(): Promise<void> {
    await this.#worker?.terminate()
    this.#worker = undefined
  }

  #run(task: PassPhraseTask): Promise<unknown> {
    if (this.#waiting.size >= MAX_WAITING)
      return Promise.reject(new UnavailableError('Too many people are signing in at this moment. Try again in a few seconds.'))
    const worker = (this.#worker ??= this.#start())
    const id = ++this.#lastId
    return new Promise((resolve, reject) => {
      this.#waiting.set(id, { resolve, reject })
      worker.ref()
      worker.postMessage({ id, task })
    })
  }

  #start(): Worker {
    const worker = new Worker(new URL('./pass-phrase-worker.mjs', import.meta.url), { execArgv: [] })
    worker.unref()
    worker.on('message', ({ id, result }: { id: number; result: unknown }) => {
      this.#waiting.get(id)?.resolve(result)
      this.#waiting.delete(id)
      if (this.#waiting.size === 0) worker.unref()
    })
    worker.on('error', (error) => {
      for (const { reject } of this.#waiting.values()) reject(error)
      this.#waiting.clear()
      this.#worker = undefined
    })
    return worker
  }
}

const pool = new PassPhrasePool()

/** The pool of this process; its thread starts at the first sign-in. */
export function passPhrasePool(): PassPhrasePool {
  return pool
}
