import { beforeAll, describe, expect, test } from 'vitest'
import { AuditEntry } from '#server/models/audit-entry.ts'
import { OutboxMail } from '#server/models/outbox-mail.ts'
import { Sample } from '#server/models/sample.ts'
import { Signal } from '#server/models/signal.ts'
import { Weighing } from '#server/models/weighing.ts'
import { chainOf } from '#server/services/audit.ts'
import { verifyChain } from '#server/services/verify-audit.ts'
import { buildRun, buildSite, type Run } from '../build.ts'
import { startApi, type Api, type Caller } from './harness.ts'

let api: Api
beforeAll(async () => {
  api = await startApi()
})

interface Station extends Run {
  operator: Caller
  sampleId: string
}

async function openSample(run: Run, n = 12): Promise<Station> {
  const operator = await api.as(run.site, 'operator')
  const response = await operator.post(`/api/batches/${run.batch.id}/samples`, { kind: 'routine', balanceId: run.balance.id, plannedN: n })
  expect(response.status).toBe(201)
  return { ...run, operator, sampleId: (response.body as { id: string }).id }
}

const put = ({ operator, sampleId }: Station, ordinal: number, grossMg: number, more: object = {}) =>
  operator.put(`/api/samples/${sampleId}/weighings/${ordinal}`, { grossMg, shownDecimals: 1, ...more })

/** Twelve gross weights around 496 mg: 400 mg of fill in a shell of 96 mg. */
const GOOD = [495.1, 497.3, 494.2, 496.8, 498.0, 495.5, 496.1, 493.9, 497.7, 496.4, 495.0, 496.0]

async function weighAll(station: Station, weights = GOOD): Promise<void> {
  for (const [place, weight] of weights.entries()) expect((await put(station, place + 1, weight, { isConfirmed: true })).status).toBe(200)
}

describe('a weight', () => {
  test.each([
    ['not a number', { grossMg: 'heavy' }, '/grossMg'],
    ['negative', { grossMg: -3 }, '/grossMg'],
    ['nothing', { grossMg: 0 }, '/grossMg'],
    ['of another thing', { grossMg: 6_000 }, '/grossMg'],
    ['with more decimals than the balance shows', { grossMg: 496.12, shownDecimals: 2 }, '/shownDecimals'],
    ['with more decimals than were shown', { grossMg: 496.12 }, '/grossMg'],
    ['lighter than its shell', { grossMg: 90 }, '/grossMg'],
    ['at a position the machine lacks', { grossMg: 496, position: 13 }, '/position'],
    ['with an unknown field', { grossMg: 496, verdict: 'in-control' }, '/'],
  ])('%s is refused, naming the field', async (_what, body, pointer) => {
    const station = await openSample(await buildRun())
    const response = await station.operator.put(`/api/samples/${station.sampleId}/weighings/1`, { shownDecimals: 1, ...body })
    expect(response.status).toBe(422)
    expect(response.body.issues[0]).toMatchObject({ pointer })
    expect(await Weighing.count({ where: { sampleId: station.sampleId } })).toBe(0)
  })

  test('far from the target is asked about once, then kept and marked', async () => {
    const station = await openSample(await buildRun())
    const asked = await put(station, 1, 620)
    expect(asked.body).toMatchObject({ type: '/problems/implausible-weight', status: 409 })
    const confirmed = await put(station, 1, 620, { isConfirmed: true })
    expect(confirmed.body.weighing).toMatchObject({ grossMg: 620, isQuestioned: true })
  })

  test('comes in order, and never twice with another value', async () => {
    const station = await openSample(await buildRun())
    expect((await put(station, 2, 496)).body).toMatchObject({ type: '/problems/capsule-out-of-order', next: 1 })
    expect((await put(station, 1, 496.1)).status).toBe(200)
    expect((await put(station, 1, 496.1)).status).toBe(200)
    expect((await put(station, 1, 497)).body).toMatchObject({ type: '/problems/capsule-weighed' })
    expect(await Weighing.count({ where: { sampleId: station.sampleId } })).toBe(1)
  })

  test('sent by two stations at once is stored once', async () => {
    const station = await openSample(await buildRun())
    const both = await Promise.all([put(station, 1, 496.1), put(station, 1, 497.2)])
    expect(both.map(({ status }) => status).sort()).toEqual([200, 409])
    expect(await Weighing.count({ where: { sampleId: station.sampleId } })).toBe(1)
  })

  test('of a foreign site is not to be found', async () => {
    const station = await openSample(await buildRun())
    const stranger = await api.as(await buildSite(), 'operator')
    expect((await stranger.put(`/api/samples/${station.sampleId}/weighings/1`, { grossMg: 496, shownDecimals: 1 })).status).toBe(404)
  })
})

test('after seven of twelve weights the browser closes: seven are there, each with its own time and audit entry, and the sample goes on', async () => {
  const station = await openSample(await buildRun())
  for (let ordinal = 1; ordinal <= 7; ordinal++) await put(station, ordinal, GOOD[ordinal - 1] ?? 0)
  const again = await station.operator.get(`/api/samples/${station.sampleId}`)
  expect(again.body).toMatchObject({ state: 'incomplete', n: 7 })
  expect(await AuditEntry.count({ where: { chain: chainOf.batch(station.batch.id), action: 'weight:keep' } })).toBe(7)
  const early = await station.operator.post(`/api/samples/${station.sampleId}/completion`)
  expect(early.body).toMatchObject({ type: '/problems/capsules-missing', weighed: 7 })
  const second = await station.operator.post(`/api/batches/${station.batch.id}/samples`, { kind: 'routine', balanceId: station.balance.id })
  expect(second.body).toMatchObject({ type: '/problems/sample-open', sampleId: station.sampleId })
  for (let ordinal = 8; ordinal <= 12; ordinal++) await put(station, ordinal, GOOD[ordinal - 1] ?? 0)
  const done = await station.operator.post(`/api/samples/${station.sampleId}/completion`)
  expect(done.body).toMatchObject({ state: 'complete', verdict: 'in-control', n: 12 })
  expect((done.body as { meanMg: number }).meanMg).toBeCloseTo(GOOD.reduce((sum, each) => sum + each, 0) / 12 - 96, 3)
  expect(await verifyChain(chainOf.batch(station.batch.id))).toBeUndefined()
})

test('a mean beyond action makes one signal and one mail to the engineers, however often it is completed', async () => {
  const run = await buildRun()
  const engineer = await api.as(run.site, 'engineer')
  const station = await openSample(run)
  await weighAll(station, GOOD.map((weight) => Math.round((weight - 25) * 10) / 10))
  const done = await station.operator.post(`/api/samples/${station.sampleId}/completion`, {}, 'completion-1')
  expect(done.body).toMatchObject({ verdict: 'action', verdictReasons: [expect.objectContaining({ test: 'mean-action', name: 'mean too low' })] })
  await station.operator.post(`/api/samples/${station.sampleId}/completion`, {}, 'completion-1')
  const signals = await Signal.findAll({ where: { batchId: run.batch.id } })
  expect(signals).toHaveLength(1)
  const mails = await OutboxMail.findAll({ where: { siteId: run.site.id } })
  expect(mails).toHaveLength(1)
  expect(mails[0]?.recipients).toContain(engineer.user.email)
  const [signal] = (await engineer.get(`/api/signals?batchId=${run.batch.id}&state=open`)).body as { id: string; version: number }[]
  const seen = await engineer.post(`/api/signals/${signal?.id ?? ''}/acknowledgement`, { version: signal?.version })
  expect(seen.body).toMatchObject({ state: 'acknowledged', acknowledgedBy: engineer.user.name })
  expect((await engineer.post(`/api/signals/${signal?.id ?? ''}/closure`, { version: 2, cause: '', reaction: '' })).status).toBe(422)
  const closed = await engineer.post(`/api/signals/${signal?.id ?? ''}/closure`, { version: 2, cause: 'Seal ring', reaction: 'Renewed, two good samples' })
  expect(closed.body).toMatchObject({ state: 'closed', cause: 'Seal ring' })
})

test('a correction keeps the first reading, needs a reason, and is judged again', async () => {
  const station = await openSample(await buildRun())
  await weighAll(station, [...GOOD.slice(0, 11), 596])
  expect((await station.operator.post(`/api/samples/${station.sampleId}/completion`)).body).toMatchObject({ verdict: 'action' })
  const path = `/api/samples/${station.sampleId}/weighings/12/corrections`
  expect((await station.operator.post(path, { grossMg: 496, shownDecimals: 1, reason: '   ' })).status).toBe(422)
  const corrected = await station.operator.post(path, { grossMg: 496, shownDecimals: 1, reason: 'Typed 596 for 496' })
  expect(corrected.body).toMatchObject({ verdict: 'in-control', correctionCount: 1 })
  const last = (corrected.body as { weighings: object[] }).weighings[11]
  expect(last).toMatchObject({ grossMg: 496, version: 2, corrections: [{ version: 2, reason: 'Typed 596 for 496' }] })
  expect((await Weighing.findOne({ where: { sampleId: station.sampleId, ordinal: 12 } }))?.grossMg).toBe(596)
})

test('an abandoned sample stays visible with its reason', async () => {
  const station = await openSample(await buildRun())
  await put(station, 1, 496)
  expect((await station.operator.post(`/api/samples/${station.sampleId}/abandonment`, { reason: '' })).status).toBe(422)
  expect((await station.operator.post(`/api/samples/${station.sampleId}/abandonment`, { reason: 'Dish dropped' })).body).toMatchObject({ state: 'abandoned', n: 1 })
  expect((await put(station, 2, 496)).body).toMatchObject({ type: '/problems/sample-not-incomplete' })
})

test('the due list names what is next and why', async () => {
  const run = await buildRun()
  const operator = await api.as(run.site, 'operator')
  const due = async () => (await operator.get('/api/due-samples')).body as object[]
  expect(await due()).toEqual([expect.objectContaining({ batchId: run.batch.id, kind: 'routine', isOverdue: true, n: 12 })])
  await operator.post(`/api/batches/${run.batch.id}/events`, { kind: 'adjustment', setting: 'penetration', station: 4, valueFrom: 12, valueTo: 12.5, reason: 'Mean low' })
  expect(await due()).toEqual([expect.objectContaining({ kind: 'after-adjustment', because: 'a setting was moved' })])
})

describe('a balance file', () => {
  const mapping = { delimiter: ',', decimal: '.', headerRow: 1, columns: { weight: 'Weight' }, unit: 'mg', split: { by: 'whole-file' } }
  const upload = (run: Run, operator: Caller, content: string | Buffer, name = 'weights.csv') =>
    operator.post('/api/weighing-files').unset('Content-Type').field('batchId', run.batch.id).field('balanceId', run.balance.id).attach('file', Buffer.from(content), name)
  const fileOf = (weights: readonly number[]): string => `Weight\n${weights.join('\n')}\n`

  test.each([
    ['empty', '', /empty/],
    ['not a number', fileOf(GOOD).replace('494.2', 'heavy'), /line 4/i],
    ['negative', fileOf(GOOD).replace('494.2', '-494.2'), /line 4/i],
    ['a formula', fileOf(GOOD).replace('494.2', '=A1+1'), /line 4/i],
  ])('%s is refused whole', async (_what, content, message) => {
    const run = await buildRun()
    const operator = await api.as(run.site, 'operator')
    const uploaded = await upload(run, operator, content)
    const id = (uploaded.body as { file?: { id: string } }).file?.id
    const response = id === undefined ? uploaded : await operator.post(`/api/weighing-files/${id}/publication`, { mapping })
    expect(response.status).toBe(422)
    expect(JSON.stringify(response.body)).toMatch(message)
    expect(await Sample.count({ where: { batchId: run.batch.id } })).toBe(0)
  })

  test('with 200 weights is taken whole, its bytes are kept, and it is never taken twice', async () => {
    const run = await buildRun()
    const operator = await api.as(run.site, 'operator')
    const weights = Array.from({ length: 200 }, (_, place) => Math.round((496 + 3 * Math.sin(place)) * 10) / 10)
    const content = fileOf(weights)
    const uploaded = await upload(run, operator, content)
    expect(uploaded.status).toBe(201)
    const { id } = (uploaded.body as { file: { id: string } }).file
    expect(await Sample.count({ where: { batchId: run.batch.id } })).toBe(0)
    const taken = await operator.post(`/api/weighing-files/${id}/publication`, { mapping })
    expect(taken.body).toMatchObject({ state: 'published', report: { rows: 200, samples: 1 } })
    const [sampleId = ''] = (taken.body as { sampleIds: string[] }).sampleIds
    expect(await Weighing.count({ where: { sampleId } })).toBe(200)
    const original = await operator.get(`/api/weighing-files/${id}/original`).buffer(true)
    expect(Buffer.from(original.body as Buffer).toString()).toBe(content)
    const second = await upload(run, operator, content, 'copy.csv')
    expect(second.body).toMatchObject({ type: '/problems/file-already-published', weighingFileId: id })
    const next = await upload(run, operator, fileOf(GOOD))
    expect((next.body as { preview: { mapping: object } }).preview.mapping).toMatchObject({ columns: { weight: 'Weight' }, unit: 'mg' })
    expect(await verifyChain(chainOf.batch(run.batch.id))).toBeUndefined()
  })
})

