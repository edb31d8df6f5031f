import { beforeAll, describe, expect, test } from 'vitest'
import { AuditEntry } from '#server/models/audit-entry.ts'
import { Balance } from '#server/models/balance.ts'
import { ControlPlan } from '#server/models/control-plan.ts'
import type { Product } from '#server/models/product.ts'
import { Sample } from '#server/models/sample.ts'
import { Signature } from '#server/models/signature.ts'
import type { Site } from '#server/models/site.ts'
import { buildBalance, buildControlPlan, buildProduct, buildRun, buildSite, buildUser, PASS_PHRASE } from '../build.ts'
import { startApi, type Api, type Caller } from './harness.ts'

let api: Api
let site: Site
let engineer: Caller
let qa: Caller
beforeAll(async () => {
  api = await startApi()
  site = await buildSite()
  engineer = await api.as(site, 'engineer')
  qa = await api.signIn(await buildUser({ site, roles: ['qa'], passPhrase: PASS_PHRASE }))
})

const LIMITS = {
  ...{ meanAlertPercent: 3, meanActionPercent: 5, individualAlertPercent: 7.5, individualActionPercent: 10 },
  ...{ rsdAlertPercent: 3, rsdActionPercent: 4 },
}
const proposal = (product: Product, fields: object = {}) => ({
  ...{ productId: product.id, basis: 'net-mean-tare', sampleSize: 12, startUpSampleSize: 24, intervalMinutes: 30, chart: 'xbar-s' },
  ...{ runTests: [3, 1], ...LIMITS, reactionSteps: ['Weigh a sample of double size at once.'] },
  statisticalGround: 'Twelve capsules see a shift of one sigma within two samples, nine times in ten.',
  ...fields,
})

describe('control plans', () => {
  test.each([
    [{ meanAlertPercent: 6 }, '/meanAlertPercent'],
    [{ rsdAlertPercent: 5 }, '/rsdAlertPercent'],
    [{ sampleSize: 1 }, '/sampleSize'],
    [{ runTests: [1, 1] }, '/runTests'],
    [{ runTests: [9] }, '/runTests/0'],
    [{ runTests: [] }, '/runTests'],
    [{ intervalMinutes: 1_441 }, '/intervalMinutes'],
    [{ statisticalGround: 'because' }, '/statisticalGround'],
    // ±11 % of 400 mg is 356 to 444 mg; the specification is 360 to 440 mg.
    [{ individualActionPercent: 11 }, '/individualActionPercent'],
    [{ meanActionPercent: 10.5 }, '/meanActionPercent'],
  ])('%j is refused at %s', async (fields, pointer) => {
    const product = await buildProduct(site)
    const response = await engineer.post('/api/control-plans', proposal(product, fields))
    expect(response.status).toBe(422)
    expect(response.body.issues.map((issue: { pointer: string }) => issue.pointer)).toEqual([pointer])
    expect(await ControlPlan.count({ where: { productId: product.id } })).toBe(0)
  })

  test('limits exactly at the specification are allowed', async () => {
    const product = await buildProduct(site)
    const response = await engineer.post('/api/control-plans', proposal(product, { meanActionPercent: 10 }))
    expect(response.status).toBe(201)
    expect(response.body).toMatchObject({ state: 'proposed', planVersion: 1, runTests: [1, 3], proposedBy: { id: engineer.user.id } })
  })

  test('a product of another site is not there', async () => {
    const product = await buildProduct(await buildSite())
    expect((await engineer.post('/api/control-plans', proposal(product))).status).toBe(404)
    expect((await engineer.get(`/api/control-plans?productId=${product.id}`)).status).toBe(404)
  })

  test('approval needs another person, the right pass-phrase and the version that was seen; it supersedes the plan before', async () => {
    const product = await buildProduct(site)
    const before = await buildControlPlan(site, product)
    const { id } = (await engineer.post('/api/control-plans', proposal(product))).body as { id: string }
    const path = `/api/control-plans/${id}/approval`
    expect((await engineer.post(path, { version: 1, password: PASS_PHRASE })).status).toBe(403)
    const both = await api.signIn(await buildUser({ site, roles: ['engineer', 'qa'], passPhrase: PASS_PHRASE }))
    const own = (await both.post('/api/control-plans', proposal(product))).body as { id: string }
    const alone = await both.post(`/api/control-plans/${own.id}/approval`, { version: 1, password: PASS_PHRASE })
    expect(alone.body.type).toBe('/problems/same-person')
    expect((await qa.post(path, { version: 7, password: PASS_PHRASE })).status).toBe(409)
    const wrong = await qa.post(path, { version: 1, password: 'not my pass-phrase' })
    expect(wrong.body.issues[0].pointer).toBe('/password')
    expect((await ControlPlan.findByPk(id))?.state).toBe('proposed')
    const answer = await qa.post(path, { version: 1, password: PASS_PHRASE })
    expect(answer.body).toMatchObject({ state: 'approved', approvedBy: { id: qa.user.id }, version: 2 })
    await before.reload()
    expect(before.state).toBe('superseded')
    expect(await Signature.count({ where: { recordId: id, meaning: 'control plan approved' } })).toBe(1)
    expect(await AuditEntry.count({ where: { recordId: id, action: 'control-plan:approve' } })).toBe(1)
    expect((await qa.post(path, { version: 2, password: PASS_PHRASE })).body.type).toBe('/problems/plan-not-proposed')
  })

  test('of two plans approved at the same moment one stands', async () => {
    const product = await buildProduct(site)
    const plans = [
      await engineer.post('/api/control-plans', proposal(product)),
      await engineer.post('/api/control-plans', proposal(product)),
    ]
    expect(plans.map(({ body }) => (body as { planVersion: number }).planVersion)).toEqual([1, 2])
    await Promise.all(
      plans.map(({ body }) => qa.post(`/api/control-plans/${(body as { id: string }).id}/approval`, { version: 1, password: PASS_PHRASE })),
    )
    expect(await ControlPlan.count({ where: { productId: product.id, state: 'approved' } })).toBe(1)
    expect(await ControlPlan.count({ where: { productId: product.id, state: 'superseded' } })).toBe(1)
  })

  test('a plan is withdrawn with a reason: proposed by the engineer, approved by QA alone', async () => {
    const product = await buildProduct(site)
    const proposed = (await engineer.post('/api/control-plans', proposal(product))).body as { id: string }
    expect((await engineer.post(`/api/control-plans/${proposed.id}/withdrawal`, { version: 1, reason: '' })).status).toBe(422)
    const operator = await api.as(site, 'operator')
    expect((await operator.post(`/api/control-plans/${proposed.id}/withdrawal`, { version: 1, reason: 'not mine' })).status).toBe(403)
    const withdrawn = await engineer.post(`/api/control-plans/${proposed.id}/withdrawal`, { version: 1, reason: 'wrong interval' })
    expect(withdrawn.body).toMatchObject({ state: 'withdrawn', version: 2 })
    const approved = await buildControlPlan(site, product)
    expect((await engineer.post(`/api/control-plans/${approved.id}/withdrawal`, { version: 1, reason: 'wrong' })).status).toBe(403)
    expect((await qa.post(`/api/control-plans/${approved.id}/withdrawal`, { version: 1, reason: 'wrong' })).body.state).toBe('withdrawn')
    expect((await qa.post(`/api/control-plans/${approved.id}/withdrawal`, { version: 2, reason: 'again' })).status).toBe(409)
  })
})

describe('balances', () => {
  const fields = {
    description: 'Bench',
    readabilityMg: 0.1,
    repeatabilitySdMg: 0.15,
    capacityMg: 220_000,
    safetyFactor: 1,
    calibrationDueOn: '2099-12-31',
  }
  const check = { kind: 'daily', referenceWeight: 'W-500', nominalMg: 500, toleranceMg: 0.5, remarks: '' }

  test('the smallest weight follows repeatability, readability and safety factor', async () => {
    const admin = await api.as(site, 'administrator')
    // Published check value: s = 0.00015 g gives 0.3 g.
    const made = await admin.post('/api/balances', { siteId: site.id, code: `B-${Date.now()}`, ...fields })
    expect(made.body.minimumWeightMg).toBeCloseTo(300, 9)
    expect(made.body.minimumNetMg).toBeCloseTo(300 * Math.SQRT2, 9)
    expect(made.body.state).toBe('out-of-use')
    // s below 0.41 d counts as 0.41 d: 820 × 0.1 mg, twice with a factor of 2.
    const fine = { ...fields, code: `B-${Date.now()}`, repeatabilitySdMg: 0.01, safetyFactor: 2 }
    expect((await admin.post('/api/balances', { siteId: site.id, ...fine })).body.minimumWeightMg).toBeCloseTo(164, 9)
  })

  test('products below the smallest weight are named', async () => {
    const own = await buildSite()
    const balance = await buildBalance(own)
    const light = await buildProduct(own, { targetFillMg: 60 })
    const heavy = await buildProduct(own, { targetFillMg: 400 })
    const viewer = await api.as(own, 'viewer')
    const { products } = (await viewer.get(`/api/balances/${balance.id}`)).body as { products: { id: string; isBelowMinimum: boolean }[] }
    expect(products.find(({ id }) => id === light.id)).toMatchObject({ isBelowMinimum: true, isNetBelowMinimum: true })
    expect(products.find(({ id }) => id === heavy.id)).toMatchObject({ isBelowMinimum: false, isNetBelowMinimum: false })
  })

  test('a reading between two steps, above capacity, in the future or without an external weight is refused', async () => {
    const { id } = await buildBalance(site)
    const post = async (body: object) => (await engineer.post(`/api/balances/${id}/checks`, body)).body.issues[0].pointer as string
    expect(await post({ ...check, readingMg: 500.05 })).toBe('/readingMg')
    expect(await post({ ...check, nominalMg: 250_000, readingMg: 250_000 })).toBe('/readingMg')
    expect(await post({ ...check, readingMg: 500, checkedAt: '2099-01-01T00:00:00Z' })).toBe('/checkedAt')
    expect(await post({ ...check, readingMg: 500, referenceWeight: '' })).toBe('/referenceWeight')
    expect(await post({ ...check, kind: 'repeatability', readingsMg: [500, 500] })).toBe('/readingsMg')
  })

  test('a new balance comes into use by its first passed check', async () => {
    const admin = await api.as(site, 'administrator')
    const { id } = (await admin.post('/api/balances', { siteId: site.id, code: `B-${Date.now()}`, ...fields })).body as { id: string }
    const answer = await engineer.post(`/api/balances/${id}/checks`, { ...check, readingMg: 500.5 })
    expect(answer.status).toBe(201)
    expect(answer.body).toMatchObject({ state: 'in-use', lastCheck: { hasPassed: true, referenceWeight: 'W-500' } })
  })

  test('a failed check takes the balance out of use and names every sample since the last good one; coming back needs a passed check', async () => {
    const run = await buildRun()
    const operator = await api.as(run.site, 'operator')
    const own = await api.as(run.site, 'engineer')
    const sample = {
      ...{ batchId: run.batch.id, sequence: 1, kind: 'routine' as const, basis: 'gross' as const, plannedN: 12, entry: 'typed' as const },
      ...{ toolingSetId: run.toolingSet.id, shellLotId: run.shellLot.id, balanceId: run.balance.id, weighedById: operator.user.id },
    }
    await Sample.create({ ...sample, startedAt: new Date(Date.now() - 3_600_000) })
    const after = await Sample.create({ ...sample, sequence: 2, startedAt: new Date(Date.now() + 1_000) })
    const path = `/api/balances/${run.balance.id}`
    const failed = (await operator.post(`${path}/checks`, { ...check, readingMg: 500.6 })).body
    expect(failed).toMatchObject({ state: 'out-of-use', lastCheck: { hasPassed: false } })
    expect(failed.samplesInDoubt).toEqual([expect.objectContaining({ sampleId: after.id, batchNumber: run.batch.number })])
    const { code, description, readabilityMg, repeatabilitySdMg, capacityMg, safetyFactor, calibrationDueOn } = failed
    const back = {
      code,
      description,
      readabilityMg,
      repeatabilitySdMg,
      capacityMg,
      safetyFactor,
      calibrationDueOn,
      state: 'in-use',
      reason: 'serviced',
    }
    expect((await own.put(path, { ...back, version: failed.version })).body.type).toBe('/problems/no-passed-check')
    const passed = (await operator.post(`${path}/checks`, { ...check, readingMg: 500 })).body
    expect(passed.state).toBe('out-of-use')
    const overdue = await own.put(path, { ...back, calibrationDueOn: '2020-01-01', version: passed.version })
    expect(overdue.body.type).toBe('/problems/calibration-overdue')
    const returned = await own.put(path, { ...back, version: passed.version })
    expect(returned.body.state).toBe('in-use')
  })

  test('repeatability books the SD of ten weighings', async () => {
    const { id } = await buildBalance(site)
    const readingsMg = [500, 500.1, 500, 500.1, 500, 500.1, 500, 500.1, 500, 500.1]
    const repeatability = { ...check, kind: 'repeatability', readingsMg, toleranceMg: 0.1 }
    const answer = (await engineer.post(`/api/balances/${id}/checks`, repeatability)).body
    // Ten values 0.05 from their mean: SD = √(10 · 0.05² / 9) = 0.0527.
    expect(answer).toMatchObject({ repeatabilitySdMg: 0.0527, lastCheck: { readingMg: 0.0527, hasPassed: true } })
    const failed = (await engineer.post(`/api/balances/${id}/checks`, { ...repeatability, toleranceMg: 0.05 })).body
    expect(failed.state).toBe('out-of-use')
    expect(await Balance.count({ where: { id, state: 'out-of-use' } })).toBe(1)
  })

  test('a passed repeatability does not heal a failed accuracy check', async () => {
    const run = await buildRun()
    const own = await api.as(run.site, 'engineer')
    const path = `/api/balances/${run.balance.id}`
    await own.post(`${path}/checks`, { ...check, readingMg: 501 })
    const readingsMg = Array.from({ length: 10 }, (_, place) => 500 + (place % 2) / 10)
    const after = (await own.post(`${path}/checks`, { ...check, kind: 'repeatability', readingsMg, toleranceMg: 0.1 })).body
    expect(after).toMatchObject({ state: 'out-of-use', lastCheck: { kind: 'repeatability', hasPassed: true } })
    const { code, version } = after
    const back = { ...fields, code, version, state: 'in-use', reason: 'repeats well' }
    expect((await own.put(path, back)).body).toMatchObject({
      type: '/problems/no-passed-check',
      title: expect.stringMatching(/accuracy failed/),
    })
  })
})
