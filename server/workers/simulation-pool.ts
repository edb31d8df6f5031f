import { Worker } from 'node:worker_threads'
import { StatisticsError } from '#shared/statistics/errors.ts'
import { UnavailableError } from '../errors.ts'
import type { SimulationReply, SimulationResults, SimulationTask } from './simulation-task.ts'

interface PoolLimits {
  threads: number
  maxWaiting: number
  /** A task that runs longer is ended with its thread; the functions bound their own work well below this. */
  timeLimitMs: number
}

interface Job {
  task: SimulationTask
  resolve: (result: SimulationResults[SimulationTask['kind']]) => void
  reject: (error: Error) => void
}

interface Thread {
  worker: Worker
  job: Job | undefined
  deadline: NodeJS.Timeout | undefined
}

/** The reason a cancelled task is rejected with; the client that asked has gone, so it is no failure to be looked into. */
export class SimulationCancelledError extends UnavailableError {
  constructor() {
    super('The request was withdrawn before the simulation ended.')
  }
}

/** A few threads that simulate, so that no answer of seconds ever holds up a weight. */
export class SimulationPool {
  readonly #limits: PoolLimits
  readonly #threads: Thread[] = []
  readonly #waiting: Job[] = []

  constructor(limits: PoolLimits) {
    this.#limits = limits
  }

  /**
   * Runs a task on a free thread, or in its turn.
   * @param signal ends the task when it is aborted, waiting or running
   * @throws {StatisticsError} what the calculation refuses
   * @throws {UnavailableError} when too many wait, or the time is up
   */
  run<T extends SimulationTask>(task: T, signal?: AbortSignal): Promise<SimulationResults[T['kind']]> {
    if (signal?.aborted) return Promise.reject(new SimulationCancelledError())
    if (this.#waiting.length >= this.#limits.maxWaiting) {
      return Promise.reject(new UnavailableError('Too many simulations are waiting at this moment. Try again in a few seconds.', 5))
    }
    return new Promise((resolve, reject) => {
      // A reply belongs to the task it answers, so its kind is that of the task.
      const job: Job = { task, resolve: (result) => resolve(result as SimulationResults[T['kind']]), reject }
      signal?.addEventListener('abort', () => this.#cancel(job), { once: true })
      this.#waiting.push(job)
      this.#startNext()
    })
  }

  async close(): Promise<void> {
    for (const job of this.#waiting.splice(0)) job.reject(new UnavailableError('The server is stopping.'))
    await Promise.all(this.#threads.map((thread) => this.#end(thread, new UnavailableError('The server is stopping.'))))
  }

  #startNext(): void {
    const thread = this.#threads.find(({ job }) => !job) ?? (this.#threads.length < this.#limits.threads ? this.#start() : undefined)
    const job = thread && this.#waiting.shift()
    if (!job) return
    thread.job = job
    thread.worker.ref()
    thread.deadline = setTimeout(() => {
      void this.#end(thread, new UnavailableError('The simulation took too long and was ended. Ask for less, or try again later.', 30))
    }, this.#limits.timeLimitMs)
    thread.worker.postMessage(job.task)
  }

  #start(): Thread {
    const worker = new Worker(new URL('./simulation-worker.mjs', import.meta.url), { execArgv: [] })
    worker.unref()
    const thread: Thread = { worker, job: undefined, deadline: undefined }
    worker.on('message', (reply: SimulationReply) => this.#settle(thread, reply))
    worker.on('error', (error) => void this.#end(thread, error))
    this.#threads.push(thread)
    return thread
  }

  #settle(thread: Thread, reply: SimulationReply): void {
    const job = this.#release(thread)
    thread.worker.unref()
    if ('result' in reply) job?.resolve(reply.result)
    else job?.reject(new StatisticsError(reply.refused.code, reply.refused.argument, reply.refused.message))
    this.#startNext()
  }

  #cancel(job: Job): void {
    const place = this.#waiting.indexOf(job)
    if (place >= 0) this.#waiting.splice(place, 1)
    const thread = this.#threads.find((each) => each.job === job)
    if (thread) void this.#end(thread, new SimulationCancelledError())
    else job.reject(new SimulationCancelledError())
  }

  /** A thread cannot be interrupted, only ended; the next task starts another. */
  async #end(thread: Thread, reason: Error): Promise<void> {
    const place = this.#threads.indexOf(thread)
    if (place >= 0) this.#threads.splice(place, 1)
    this.#release(thread)?.reject(reason)
    this.#startNext()
    await thread.worker.terminate()
  }

  #release(thread: Thread): Job | undefined {
    const { job } = thread
    clearTimeout(thread.deadline)
    thread.job = undefined
    return job
  }
}

const pool = new SimulationPool({ threads: 2, maxWaiting: 32, timeLimitMs: 30_000 })

/** The pool of this process; its threads start with the first simulation. */
export function simulationPool(): SimulationPool {
  return pool
}
