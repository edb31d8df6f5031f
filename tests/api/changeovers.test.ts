import { beforeAll, expect, test } from 'vitest'
import { buildRun, buildToolingSet, buildUser, PASS_PHRASE, type Run } from '../build.ts'
import { startApi, type Api, type Caller } from './harness.ts'

let api: Api
let run: Run
let fitter: Caller
beforeAll(async () => {
  api = await startApi()
  run = await buildRun()
  fitter = await api.signIn(await buildUser({ site: run.site, roles: ['fitter'], passPhrase: PASS_PHRASE }))
})

async function begin(): Promise<{ id: string; version: number }> {
  const next = await buildToolingSet(run.site)
  const response = await fitter.post('/api/changeovers', {
    machineId: run.machine.id,
    batchId: run.batch.id,
    fromToolingSetId: run.toolingSet.id,
    toToolingSetId: next.id,
    areCautionsAccepted: true,
    steps: ['Isolate and lock out', 'Fit the dosing disc'],
  })
  expect(response.status).toBe(201)
  return response.body as { id: string; version: number }
}

test('without the cautions read no work begins', async () => {
  const response = await fitter.post('/api/changeovers', { machineId: run.machine.id, toToolingSetId: run.toolingSet.id, areCautionsAccepted: false, steps: ['A step'] })
  expect(response.status).toBe(422)
  expect(response.body.issues[0]).toMatchObject({ pointer: '/areCautionsAccepted', message: expect.stringContaining('cautions') as string })
})

test('a time in the future is refused', async () => {
  const response = await fitter.post('/api/changeovers', {
    machineId: run.machine.id,
    toToolingSetId: run.toolingSet.id,
    lastGoodCapsuleAt: new Date(Date.now() + 3_600_000).toISOString(),
    areCautionsAccepted: true,
    steps: ['A step'],
  })
  expect(response.status).toBe(422)
  expect(response.body.issues[0]).toMatchObject({ pointer: '/lastGoodCapsuleAt', message: expect.stringContaining('future') as string })
})

test('open steps keep it open, and say which', async () => {
  const { id, version } = await begin()
  const response = await fitter.post(`/api/changeovers/${id}/end`, { version, trials: 3, scrappedCapsules: 2_000 })
  expect(response.status).toBe(409)
  expect(response.body.steps).toEqual([1, 2])
})

test('steps and readings are recorded, a second person checks, the batch carries the new tooling', async () => {
  const { id, version } = await begin()
  for (const ordinal of [1, 2]) expect((await fitter.put(`/api/changeovers/${id}/steps/${ordinal}`, { isDone: true })).status).toBe(200)
  const reading = await fitter.post(`/api/changeovers/${id}/readings`, { name: 'Disc clearance', place: 'north', value: 0.09, unit: 'mm', lowerLimit: 0.03, upperLimit: 0.08, manualReference: 'Manual 4.2' })
  expect(reading.body.readings).toEqual([expect.objectContaining({ value: 0.09, isWithin: false })])
  const done = await fitter.post(`/api/changeovers/${id}/end`, { version, trials: 3, scrappedCapsules: 2_000 })
  expect(done.body).toMatchObject({ state: 'done', trials: 3 })
  const own = await fitter.post(`/api/changeovers/${id}/check`, { version: version + 1, password: PASS_PHRASE })
  expect(own.body.type).toBe('/problems/same-person')
  const second = await api.signIn(await buildUser({ site: run.site, roles: ['operator'], passPhrase: PASS_PHRASE }))
  const wrong = await second.post(`/api/changeovers/${id}/check`, { version: version + 1, password: 'not the right phrase' })
  expect(wrong.body.issues[0]).toMatchObject({ pointer: '/password' })
  const checked = await second.post(`/api/changeovers/${id}/check`, { version: version + 1, password: PASS_PHRASE })
  expect(checked.body).toMatchObject({ state: 'checked', checkedBy: second.user.name })
  await run.batch.reload()
  expect(run.batch.toolingSetId).toBe((done.body as { toToolingSet: { id: string } }).toToolingSet.id)
})

test('an adjustment names a station of the machine, stays on its scale and says why', async () => {
  const operator = await api.as(run.site, 'operator')
  const path = `/api/batches/${run.batch.id}/events`
  const move = { kind: 'adjustment', setting: 'penetration', station: 4, valueFrom: 12, valueTo: 13, reason: 'Mean below alert twice' }
  expect((await operator.post(path, { ...move, station: 6 })).body.issues[0]).toMatchObject({ pointer: '/station' })
  expect((await operator.post(path, { ...move, valueTo: 31 })).body.issues[0]).toMatchObject({ pointer: '/valueTo', message: expect.stringContaining('0 to 30 mm') as string })
  expect((await operator.post(path, { ...move, reason: '  ' })).status).toBe(422)
  const recorded = await operator.post(path, move)
  expect(recorded.status).toBe(201)
  expect(recorded.body).toMatchObject({ kind: 'adjustment', unit: 'mm', valueFrom: 12, valueTo: 13, recordedBy: operator.user.name })
  expect((await operator.get(path)).body).toEqual(expect.arrayContaining([recorded.body]))
})
