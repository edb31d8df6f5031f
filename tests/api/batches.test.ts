import { beforeAll, expect, test } from 'vitest'
import { ControlPlan } from '#server/models/control-plan.ts'
import { Batch } from '#server/models/batch.ts'
import { buildRun, buildSite, buildUser, PASS_PHRASE, type Run } from '../build.ts'
import { startApi, type Api } from './harness.ts'

let api: Api
let run: Run
beforeAll(async () => {
  api = await startApi()
  run = await buildRun()
})

let lastNumber = 0
function plan(): Record<string, unknown> {
  lastNumber += 1
  const { site, machine, product, toolingSet, shellLot } = run
  return {
    siteId: site.id,
    number: `T-${lastNumber}`,
    machineId: machine.id,
    productId: product.id,
    toolingSetId: toolingSet.id,
    shellLotId: shellLot.id,
    blendLot: 'BL-1',
    plannedCapsules: 100_000,
  }
}

test('a person of another site learns nothing of a batch', async () => {
  const stranger = await api.as(await buildSite(), 'engineer')
  expect((await stranger.get(`/api/batches/${run.batch.id}`)).status).toBe(404)
  expect((await stranger.get('/api/batches')).body).toEqual({ items: [], total: 0 })
  expect((await stranger.post(`/api/batches/${run.batch.id}/end`, { version: 1, goodCapsules: 1, rejectedCapsules: 0, setUpScrapCapsules: 0 })).status).toBe(404)
})

test('unknown fields, wrong types and foreign parts are refused, each by its pointer', async () => {
  const engineer = await api.as(run.site, 'engineer')
  const response = await engineer.post('/api/batches', { ...plan(), plannedCapsules: -1, state: 'released' })
  expect(response.status).toBe(422)
  expect(response.body.issues.map(({ pointer }: { pointer: string }) => pointer).sort()).toEqual(['/', '/plannedCapsules'])
  const foreign = await engineer.post('/api/batches', { ...plan(), machineId: run.site.id })
  expect(foreign.body.issues[0]).toMatchObject({ pointer: '/machineId' })
})

test('without an approved control plan no batch is planned', async () => {
  const bare = await buildRun({ plan: { state: 'proposed' } })
  const engineer = await api.as(bare.site, 'engineer')
  const { machine, product, toolingSet, shellLot, site } = bare
  const parts = { siteId: site.id, machineId: machine.id, productId: product.id, toolingSetId: toolingSet.id, shellLotId: shellLot.id }
  const response = await engineer.post('/api/batches', { ...plan(), ...parts })
  expect(response.status).toBe(409)
  expect(response.body.type).toBe('/problems/no-approved-plan')
  expect(await ControlPlan.count({ where: { productId: product.id, state: 'approved' } })).toBe(0)
})

test('a retry with the same key plans one batch and gets the same answer; another body under that key is refused', async () => {
  const operator = await api.as(run.site, 'operator')
  const body = plan()
  const key = 'retry-key-0001'
  const answers = await Promise.all([operator.post('/api/batches', body, key), operator.post('/api/batches', body, key), operator.post('/api/batches', body, key)])
  expect(new Set(answers.map(({ status }) => status))).toEqual(new Set([201]))
  expect(new Set(answers.map(({ body: answer }) => (answer as { id: string }).id)).size).toBe(1)
  expect(await Batch.count({ where: { siteId: run.site.id, number: String(body['number']) } })).toBe(1)
  expect((await operator.post('/api/batches', { ...body, blendLot: 'BL-2' }, key)).status).toBe(422)
})

test('a POST without an idempotency key is refused', async () => {
  const operator = await api.as(run.site, 'operator')
  const response = await operator.post('/api/batches', plan()).unset('Idempotency-Key')
  expect(response.status).toBe(400)
})

test('only one batch runs on a machine', async () => {
  const operator = await api.as(run.site, 'operator')
  const planned = (await operator.post('/api/batches', plan())).body as { id: string; version: number }
  const response = await operator.post(`/api/batches/${planned.id}/start`, { version: planned.version })
  expect(response.status).toBe(409)
  expect(response.body.type).toBe('/problems/machine-busy')
})

test('a stale version gets both versions and changes nothing', async () => {
  const { batch, site } = await buildRun()
  const operator = await api.as(site, 'operator')
  await batch.update({ version: 5 })
  const response = await operator.post(`/api/batches/${batch.id}/end`, { version: 4, goodCapsules: 1, rejectedCapsules: 0, setUpScrapCapsules: 0 })
  expect(response.status).toBe(409)
  expect(response.body).toMatchObject({ type: '/problems/stale-version', yourVersion: 4, currentVersion: 5 })
  await batch.reload()
  expect(batch.state).toBe('running')
})

test('the start-up is approved only with a start-up sample and the right pass-phrase', async () => {
  const { batch, site } = await buildRun()
  await batch.update({ startUpApprovedAt: null, startUpApprovedById: null })
  const engineer = await api.signIn(await buildUser({ site, roles: ['engineer'], passPhrase: PASS_PHRASE }))
  const response = await engineer.post(`/api/batches/${batch.id}/start-up-approval`, { version: 1, password: PASS_PHRASE })
  expect(response.body.type).toBe('/problems/no-start-up-sample')
})

test('a run ends once, with what came out', async () => {
  const { batch, site } = await buildRun()
  const operator = await api.as(site, 'operator')
  const counts = { goodCapsules: 590_000, rejectedCapsules: 1_200, setUpScrapCapsules: 800 }
  const ended = await operator.post(`/api/batches/${batch.id}/end`, { version: 1, ...counts })
  expect(ended.body).toMatchObject({ state: 'ended', ...counts, version: 2 })
  expect((await operator.post(`/api/batches/${batch.id}/end`, { version: 2, ...counts })).status).toBe(409)
})
