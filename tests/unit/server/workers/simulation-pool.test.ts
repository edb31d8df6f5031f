import { afterAll, beforeAll, expect, test } from 'vitest'
import { SimulationPool } from '#server/workers/simulation-pool.ts'
import type { SimulationTask } from '#server/workers/simulation-task.ts'
import { averageRunLength } from '#shared/statistics/run-length.ts'

const pool = new SimulationPool({ threads: 1, maxWaiting: 2, timeLimitMs: 30_000 })
const quick = { kind: 'run-length', request: { chart: 'individuals', n: 1, shiftSigma: 1 } } as const satisfies SimulationTask
const slow = {
  kind: 'chance-of-passing',
  request: { standard: 'ph-eur-2.9.5', mean: 400, sd: 10, lots: 1_000_000 },
} as const satisfies SimulationTask

// The thread compiles its modules first; the tests below then measure the pool, not the compiler.
beforeAll(() => pool.run(quick), 30_000)
afterAll(() => pool.close())

test('a thread gives the answer that the function gives', async () => {
  expect(await pool.run(quick)).toEqual(averageRunLength(quick.request))
})

test('a refusal keeps its code and argument across the thread', async () => {
  const asked = pool.run({ kind: 'run-length', request: { ...quick.request, n: 0 } })
  await expect(asked).rejects.toMatchObject({ name: 'StatisticsError', code: 'out-of-range' })
})

test('the main thread goes on while a simulation runs, and a cancelled one ends', async () => {
  const cancel = new AbortController()
  const running = pool.run(slow, cancel.signal)
  let ticks = 0
  const clock = setInterval(() => ticks++, 5)
  await new Promise((resolve) => setTimeout(resolve, 200))
  clearInterval(clock)
  expect(ticks).toBeGreaterThan(10)
  cancel.abort()
  await expect(running).rejects.toMatchObject({ name: 'SimulationCancelledError' })
  expect(await pool.run(quick)).toMatchObject({ method: 'exact' })
})

test('a full queue is refused with 503, and one that waits can be cancelled', async () => {
  const cancel = new AbortController()
  const running = pool.run(slow, cancel.signal)
  const waiting = [pool.run(quick, cancel.signal), pool.run(quick, cancel.signal)]
  await expect(pool.run(quick)).rejects.toMatchObject({ status: 503 })
  cancel.abort()
  for (const each of [running, ...waiting]) await expect(each).rejects.toMatchObject({ name: 'SimulationCancelledError' })
  await expect(pool.run(quick, cancel.signal)).rejects.toMatchObject({ name: 'SimulationCancelledError' })
})

test('a task that takes too long is ended with 503, and the pool lives on', async () => {
  const hasty = new SimulationPool({ threads: 1, maxWaiting: 2, timeLimitMs: 1 })
  await expect(hasty.run(slow)).rejects.toMatchObject({ status: 503 })
  await hasty.close()
})

test('closing refuses what runs and what waits', async () => {
  const closing = new SimulationPool({ threads: 1, maxWaiting: 2, timeLimitMs: 30_000 })
  const asked = [closing.run(slow), closing.run(quick)]
  const settled = Promise.allSettled(asked)
  await closing.close()
  for (const outcome of await settled) expect(outcome).toMatchObject({ status: 'rejected', reason: { status: 503 } })
})
