import { mkdtempSync, readFileSync, rmSync, statSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { Op } from 'sequelize'
import { afterAll, beforeAll, expect, test } from 'vitest'
import { z } from 'zod'
import { generateScenario } from '#fixtures/scenario/generate-scenario.ts'
import { AuditEntry } from '#server/models/audit-entry.ts'
import { Batch } from '#server/models/batch.ts'
import { Changeover } from '#server/models/changeover.ts'
import { Disposition } from '#server/models/disposition.ts'
import { Machine } from '#server/models/machine.ts'
import { OutboxMail } from '#server/models/outbox-mail.ts'
import { Product } from '#server/models/product.ts'
import { Sample } from '#server/models/sample.ts'
import { Signal } from '#server/models/signal.ts'
import { Signature } from '#server/models/signature.ts'
import { Site } from '#server/models/site.ts'
import { Weighing } from '#server/models/weighing.ts'
import { chainOf } from '#server/services/audit.ts'
import { loadDemo } from '#server/services/demo/load-demo.ts'
import { contentHash } from '#server/services/signatures.ts'
import { verifyChain } from '#server/services/verify-audit.ts'
import { ROLES } from '#shared/permissions.ts'
import { startApi, type Api } from './harness.ts'

const SignIns = z.array(z.strictObject({ role: z.enum(ROLES), email: z.email(), password: z.string().min(15) }))
const NOW = new Date()
const SEED = 3
const folder = mkdtempSync(join(tmpdir(), 'scruple-demo-'))
const signInsFile = join(folder, 'var', 'demo-sign-ins.json')
const scenario = generateScenario({ now: NOW, seed: SEED })
let api: Api
let site: Site
let batches: Batch[]
let seconds: number

beforeAll(async () => {
  api = await startApi()
  const start = performance.now()
  await loadDemo({ now: NOW, seed: SEED, signInsFile })
  seconds = (performance.now() - start) / 1000
  site = await Site.findOne({ where: { code: scenario.site.code }, rejectOnEmpty: true })
  batches = await Batch.findAll({ where: { siteId: site.id } })
})
afterAll(() => {
  rmSync(folder, { recursive: true })
})

const batchIds = (): string[] => batches.map(({ id }) => id)

test('loads within eight seconds', () => {
  expect(seconds).toBeLessThan(8)
})

test('keeps one sign-in a role, for its owner only, and each of them opens the door', async () => {
  expect(statSync(signInsFile).mode & 0o777).toBe(0o600)
  const signIns = SignIns.parse(JSON.parse(readFileSync(signInsFile, 'utf8')))
  expect(signIns.map(({ role }) => role)).toEqual(ROLES)
  for (const { email, password } of signIns) {
    const answer = await api.anonymous.post('/api/auth/sign-in', { email, password })
    expect(answer.status).toBe(200)
  }
})

test('stores every batch, sample and weight of the scenario', async () => {
  const samples = scenario.batches.flatMap((batch) => batch.samples)
  expect(batches).toHaveLength(scenario.batches.length)
  const stored = await Sample.findAll({ where: { batchId: batchIds() } })
  expect(stored).toHaveLength(samples.length)
  expect(await Weighing.count({ where: { sampleId: stored.map(({ id }) => id) } })).toBe(
    samples.reduce((sum, { weighings }) => sum + weighings.length, 0),
  )
  expect(await Changeover.count({ where: { siteId: site.id, state: 'checked' } })).toBe(scenario.changeovers.length)
})

test('writes audit chains that hold, with an entry for each weight', async () => {
  const chains = [
    ...batchIds().map(chainOf.batch),
    chainOf.masters(site.id),
    chainOf.changeovers(site.id),
    chainOf.balances(site.id),
    chainOf.people,
  ]
  for (const chain of chains) expect(await verifyChain(chain)).toBeUndefined()
  const weights = scenario.batches.flatMap(({ samples }) => samples.flatMap(({ weighings }) => weighings)).length
  expect(await AuditEntry.count({ where: { action: 'weight:keep', chain: batchIds().map(chainOf.batch) } })).toBe(weights)
  expect(await AuditEntry.count({ where: { at: { [Op.gt]: NOW }, terminal: 'demo scenario' } })).toBe(0)
})

test('signs what can be read again: start-ups and decisions', async () => {
  const [batch] = batches
  const [sample] = await Sample.findAll({ where: { batchId: batch?.id ?? '', kind: 'start-up' } })
  const signature = await Signature.findOne({ where: { recordKind: 'start-up', recordId: batch?.id ?? '' } })
  const { id, meanMg, sdMg, n } = sample ?? {}
  expect(signature?.contentHash).toBe(contentHash({ batchId: batch?.id, sampleId: id, meanMg, sdMg, n }))
  const decisions = await Disposition.findAll({ where: { batchId: batchIds() } })
  expect(decisions.length).toBeGreaterThan(45)
  for (const { record, contentHash: hash } of decisions) expect(contentHash(z.record(z.string(), z.unknown()).parse(record))).toBe(hash)
})

test('raises a signal for each sample beyond a limit: closed where the batch is decided, active on filler 2 now', async () => {
  const beyond = await Sample.count({ where: { batchId: batchIds(), verdict: ['alert', 'action'] } })
  expect(await Signal.count({ where: { batchId: batchIds() } })).toBe(beyond)
  const decided = batches.filter(({ state }) => state === 'released' || state === 'ended').map(({ id }) => id)
  expect(await Signal.count({ where: { batchId: decided, state: ['active', 'acknowledged'] } })).toBe(0)
  const filler = await Machine.findOne({ where: { siteId: site.id, code: 'F2' }, rejectOnEmpty: true })
  const running = batches.find(({ state, machineId }) => state === 'running' && machineId === filler.id)
  const active = await Signal.findAll({ where: { batchId: running?.id ?? '', state: 'active' } })
  const mails = await OutboxMail.findAll({ where: { siteId: site.id } })
  const open = await Signal.findAll({ where: { batchId: batchIds(), state: 'active', severity: 'action' } })
  expect(mails.map(({ signalId }) => signalId).toSorted()).toEqual(open.map(({ id }) => id).toSorted())
  expect(active.some(({ sentence }) => sentence.startsWith('The mean '))).toBe(true)
})

test('most quiet samples are in control, so that a signal means something', async () => {
  const product = await Product.findOne({ where: { siteId: site.id, code: 'AF-0400' }, rejectOnEmpty: true })
  const quiet = batches.filter(({ productId, state }) => productId === product.id && state === 'released').map(({ id }) => id)
  const all = await Sample.count({ where: { batchId: quiet, state: 'complete' } })
  const calm = await Sample.count({ where: { batchId: quiet, verdict: 'in-control' } })
  expect(calm / all).toBeGreaterThan(0.85)
})

test('refuses to load twice, and leaves no half of it', async () => {
  const before = await Batch.count()
  await expect(loadDemo({ now: NOW, seed: SEED, signInsFile })).rejects.toThrow()
  expect(await Batch.count()).toBe(before)
})
