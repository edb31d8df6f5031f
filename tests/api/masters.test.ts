import { beforeAll, describe, expect, test } from 'vitest'
import { AuditEntry } from '#server/models/audit-entry.ts'
import { ControlPlan } from '#server/models/control-plan.ts'
import { ToolingPart } from '#server/models/tooling-part.ts'
import { UserRole } from '#server/models/user-role.ts'
import type { Site } from '#server/models/site.ts'
import { buildMachine, buildProduct, buildRun, buildShellLot, buildSite, buildToolingSet } from '../build.ts'
import { startApi, type Api, type Caller } from './harness.ts'

let api: Api
let site: Site
let administrator: Caller
beforeAll(async () => {
  api = await startApi()
  site = await buildSite()
  administrator = await api.as(site, 'administrator')
})

let last = 0
const newCode = (): string => `M-${String((last += 1))}`

function machine(fields: object = {}): object {
  const geometry = { boresPerGroup: 12, discGroups: 6, segments: 12, stations: 5 }
  const scale = { indexesPerMinute: 80, scaleMinMm: 0, scaleMaxMm: 30, deeperIsHigher: true }
  return { code: newCode(), name: 'Filler', ...geometry, ...scale, isActive: true, ...fields }
}

function product(fields: object = {}): object {
  const weights = { targetFillMg: 400, lowerSpecificationMg: 360, upperSpecificationMg: 440 }
  const judged = { labelClaims: [{ active: 'Active A', claimMg: 200 }], acceptanceStandards: ['usp-905-weight'] }
  return { code: newCode(), name: 'Capsules', capsuleSize: '0', ...weights, ...judged, isActive: true, ...fields }
}

const pointers = (body: { issues: { pointer: string }[] }): string[] => body.issues.map(({ pointer }) => pointer).sort()

describe('sites', () => {
  test('a site is refused a zone that is none', async () => {
    const response = await administrator.post('/api/sites', { code: newCode(), name: 'North', timeZone: 'Moon/Base' })
    expect(response.status).toBe(422)
    expect(pointers(response.body)).toEqual(['/timeZone'])
  })

  test('who adds a site administers it, and nobody else sees it', async () => {
    const made = await administrator.post('/api/sites', {
      code: `${newCode()}-${Date.now() % 1_000_000}`,
      name: 'North',
      timeZone: 'Europe/Dublin',
    })
    expect(made.status).toBe(201)
    const mine = await (await api.signIn(administrator.user)).get('/api/sites')
    expect(mine.body.map(({ id }: { id: string }) => id)).toContain(made.body.id)
    const other = await api.as(site, 'engineer')
    expect((await other.get('/api/sites')).body.map(({ id }: { id: string }) => id)).toEqual([site.id])
  })
})

describe('machines', () => {
  test.each([
    [{ boresPerGroup: 0 }, '/boresPerGroup'],
    [{ boresPerGroup: 61 }, '/boresPerGroup'],
    [{ discGroups: 25 }, '/discGroups'],
    [{ segments: 49 }, '/segments'],
    [{ stations: 13 }, '/stations'],
    [{ stations: 2.5 }, '/stations'],
    [{ indexesPerMinute: 0 }, '/indexesPerMinute'],
    [{ indexesPerMinute: 80.123 }, '/indexesPerMinute'],
    [{ scaleMinMm: 30 }, '/scaleMaxMm'],
    [{ code: 'two words' }, '/code'],
    [{ colour: 'brass' }, '/'],
  ])('%j is refused at %s', async (fields, pointer) => {
    const response = await administrator.post('/api/machines', { siteId: site.id, ...machine(fields) })
    expect(response.status).toBe(422)
    expect(pointers(response.body)).toEqual([pointer])
  })

  test('a code is given once a site; another site may use it', async () => {
    const body = machine()
    expect((await administrator.post('/api/machines', { siteId: site.id, ...body })).status).toBe(201)
    const again = await administrator.post('/api/machines', { siteId: site.id, ...body })
    expect(again.status).toBe(409)
    expect(pointers(again.body)).toEqual(['/code'])
    const elsewhere = await buildSite()
    const theirs = await api.as(elsewhere, 'administrator')
    expect((await theirs.post('/api/machines', { siteId: elsewhere.id, ...body })).status).toBe(201)
  })

  test('a machine of another site is not there', async () => {
    const stranger = await api.as(await buildSite(), 'administrator')
    const { id } = await buildMachine(site)
    expect((await stranger.put(`/api/machines/${id}`, { ...machine(), version: 1, reason: 'moved here' })).status).toBe(404)
    expect((await stranger.post('/api/machines', { siteId: site.id, ...machine() })).status).toBe(404)
    expect((await stranger.get(`/api/machines?siteId=${site.id}`)).status).toBe(404)
    expect((await stranger.get('/api/machines')).body).toEqual([])
  })

  test('a role of one site gives no right at another', async () => {
    const elsewhere = await buildSite()
    const both = await api.as(site, 'administrator')
    await UserRole.create({ userId: both.user.id, siteId: elsewhere.id, role: 'viewer' })
    expect((await both.post('/api/machines', { siteId: elsewhere.id, ...machine() })).status).toBe(403)
  })

  test('a change needs a reason, keeps both versions when stale, and is audited with old and new', async () => {
    const { id, code } = await buildMachine(site)
    const body = machine({ code, name: 'Filler two' })
    expect((await administrator.put(`/api/machines/${id}`, { ...body, version: 1, reason: '  ' })).status).toBe(422)
    const saved = await administrator.put(`/api/machines/${id}`, { ...body, version: 1, reason: 'renamed by the site' })
    expect(saved.body).toMatchObject({ name: 'Filler two', version: 2 })
    const stale = await administrator.put(`/api/machines/${id}`, { ...body, name: 'Filler three', version: 1, reason: 'renamed again' })
    expect(stale.status).toBe(409)
    expect(stale.body).toMatchObject({ yourVersion: 1, currentVersion: 2, current: { name: 'Filler two' } })
    const entries = await AuditEntry.findAll({ where: { recordId: id, action: 'machine:update' } })
    expect(entries).toHaveLength(1)
    expect(entries[0]).toMatchObject({ oldValues: { name: 'Filler' }, newValues: { name: 'Filler two' }, reason: 'renamed by the site' })
  })

  test('of two changes at the same moment one is kept', async () => {
    const { id, code } = await buildMachine(site)
    const change = (name: string) => administrator.put(`/api/machines/${id}`, { ...machine({ code, name }), version: 1, reason: 'a race' })
    const answers = await Promise.all([change('first'), change('second')])
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 409])
  })

  test('geometry is fixed once a batch was planned on it; the name is not', async () => {
    const run = await buildRun()
    const engineer = await api.as(run.site, 'engineer')
    const body = { ...machine({ code: run.machine.code }), version: 1, reason: 'a bigger disc' }
    const refused = await engineer.put(`/api/machines/${run.machine.id}`, { ...body, boresPerGroup: 18, segments: 10 })
    expect(refused.status).toBe(409)
    expect(pointers(refused.body)).toEqual(['/boresPerGroup', '/segments'])
    expect((await engineer.put(`/api/machines/${run.machine.id}`, { ...body, name: 'Other name' })).status).toBe(200)
  })
})

describe('tooling sets', () => {
  const part = { kind: 'tamping-pins', serial: 'P-1', station: 1, inspectionInterval: 1_000 }
  const set = (parts: object[], fields: object = {}) => ({
    ...{ code: newCode(), capsuleSize: '0', boresPerGroup: 12, discThicknessMm: 18.5, remarks: '', isActive: true, parts },
    ...fields,
  })

  test('an unknown size and the same part twice are refused', async () => {
    const response = await administrator.post('/api/tooling-sets', {
      siteId: site.id,
      ...set([part, { ...part, serial: 'p-1' }], { capsuleSize: '9' }),
    })
    expect(pointers(response.body)).toContain('/capsuleSize')
    const twins = await administrator.post('/api/tooling-sets', { siteId: site.id, ...set([part, { ...part, serial: 'p-1' }]) })
    expect(pointers(twins.body)).toEqual(['/parts/1/serial'])
  })

  test('a part that is taken out is kept, and is the same part when it comes back', async () => {
    const made = await administrator.post('/api/tooling-sets', { siteId: site.id, ...set([{ ...part, capsulesAtFitting: 500 }]) })
    expect(made.body.parts[0]).toMatchObject({ capsulesNow: 500, capsulesSinceInspection: 0, isInspectionDue: false })
    const { id, code, parts } = made.body
    const out = await administrator.put(`/api/tooling-sets/${id}`, { ...set([], { code }), version: 1, reason: 'pins worn' })
    expect(out.body.parts).toEqual([])
    expect(await ToolingPart.count({ where: { toolingSetId: id } })).toBe(1)
    const back = await administrator.put(`/api/tooling-sets/${id}`, {
      ...set([{ ...part, capsulesAtFitting: 700 }], { code }),
      version: 2,
      reason: 'pins are back',
    })
    expect(back.body.parts[0]).toMatchObject({ id: parts[0].id, capsulesNow: 700 })
  })

  test('a part of another set is refused', async () => {
    const other = await buildToolingSet(site)
    const foreign = await ToolingPart.create({ toolingSetId: other.id, kind: 'scraper', serial: 'S-9' })
    const { id, code } = await buildToolingSet(site)
    const response = await administrator.put(`/api/tooling-sets/${id}`, {
      ...set([{ id: foreign.id, kind: 'scraper', serial: 'S-9', station: null, inspectionInterval: null }], { code }),
      ...{ version: 1, reason: 'took a part' },
    })
    expect(pointers(response.body)).toEqual(['/parts/0/id'])
  })

  test('an inspection starts the count again', async () => {
    const { id } = await buildToolingSet(site)
    const worn = await ToolingPart.create({
      toolingSetId: id,
      kind: 'seal-ring',
      serial: 'R-1',
      capsulesNow: 5_000,
      inspectionInterval: 4_000,
    })
    const fitter = await api.as(site, 'fitter')
    const listed = (await fitter.get(`/api/tooling-sets?siteId=${site.id}`)).body.find((each: { id: string }) => each.id === id)
    expect(listed.parts[0]).toMatchObject({ isInspectionDue: true })
    const path = `/api/tooling-sets/${id}/parts/${worn.id}/inspections`
    const answer = await fitter.post(path, { version: 1, remarks: 'no wear seen' })
    expect(answer.body.parts[0]).toMatchObject({ capsulesSinceInspection: 0, isInspectionDue: false, version: 2 })
    expect((await fitter.post(path, { version: 1, remarks: 'no wear seen' })).status).toBe(409)
  })
})

describe('products', () => {
  test.each([
    [{ lowerSpecificationMg: 400 }, ['/lowerSpecificationMg']],
    [{ upperSpecificationMg: 399 }, ['/upperSpecificationMg']],
    [{ labelClaims: [] }, ['/labelClaims']],
    [
      {
        labelClaims: [
          { active: 'A', claimMg: 300 },
          { active: 'a', claimMg: 50 },
        ],
      },
      ['/labelClaims/1/active'],
    ],
    [{ labelClaims: [{ active: 'A', claimMg: 401 }] }, ['/labelClaims']],
    [{ acceptanceStandards: ['usp-905-weight', 'usp-905-weight'] }, ['/acceptanceStandards']],
    [{ targetFillMg: 400.1234 }, ['/targetFillMg']],
  ])('%j is refused', async (fields, expected) => {
    const response = await administrator.post('/api/products', { siteId: site.id, ...product(fields) })
    expect(response.status).toBe(422)
    expect(pointers(response.body)).toEqual(expected)
  })

  test('what batches were judged by is fixed; the same order of claims is no change', async () => {
    const run = await buildRun()
    const engineer = await api.as(run.site, 'engineer')
    const { code, name, acceptanceStandards } = run.product
    const body = { ...product({ code, name, acceptanceStandards }), version: 1, reason: 'a new specification' }
    const refused = await engineer.put(`/api/products/${run.product.id}`, { ...body, targetFillMg: 405 })
    expect(refused.status).toBe(409)
    expect(pointers(refused.body)).toEqual(['/targetFillMg'])
    const saved = await engineer.put(`/api/products/${run.product.id}`, { ...body, name: 'Better name' })
    expect(saved.body).toMatchObject({ name: 'Better name', hasBatches: true, approvedPlanVersion: 1, version: 2 })
  })

  test('a specification tighter than a standing plan is refused', async () => {
    const { id, code } = await buildProduct(site)
    const engineer = await api.as(site, 'engineer')
    const limits = {
      meanAlertPercent: 3,
      meanActionPercent: 5,
      individualAlertPercent: 7.5,
      individualActionPercent: 10,
      rsdAlertPercent: 3,
      rsdActionPercent: 4,
    }
    await ControlPlan.create({
      ...{ productId: id, planVersion: 1, state: 'proposed', basis: 'gross', sampleSize: 10, startUpSampleSize: 20, intervalMinutes: 30 },
      ...{
        chart: 'xbar-s',
        runTests: [1],
        ...limits,
        reactionSteps: ['stop'],
        statisticalGround: 'for the test',
        proposedById: engineer.user.id,
      },
    })
    const body = { ...product({ code }), version: 1, reason: 'a tighter one' }
    const response = await engineer.put(`/api/products/${id}`, { ...body, lowerSpecificationMg: 370, upperSpecificationMg: 430 })
    expect(response.status).toBe(409)
    expect(response.body.type).toBe('/problems/plan-beyond-specification')
  })
})

describe('shell lots', () => {
  const weightsMg = [95.1, 96.2, 97, 94.8, 96.6, 95.5, 96.1, 97.2, 95.9, 96.6]

  test('too few, not plausible and unknown fields are refused, nothing half-saved', async () => {
    const { id } = await buildShellLot(site)
    const operator = await api.as(site, 'operator')
    const path = `/api/shell-lots/${id}/tares`
    expect(pointers((await operator.post(path, { weightsMg: [96, 95] })).body)).toEqual(['/weightsMg'])
    expect(pointers((await operator.post(path, { weightsMg: [...weightsMg, 0] })).body)).toEqual(['/weightsMg/10'])
    expect(pointers((await operator.post(path, { weightsMg: [...weightsMg, 496] })).body)).toEqual(['/weightsMg/10'])
    const detail = (await operator.get(`/api/shell-lots/${id}`)).body
    expect(detail).toMatchObject({ tareVersion: 1, version: 1, tares: [] })
  })

  test('a tare has mean, SD, n and standard error; a later one leaves the earlier readable', async () => {
    const { id } = await buildShellLot(site)
    const operator = await api.as(site, 'operator')
    const first = (await operator.post(`/api/shell-lots/${id}/tares`, { weightsMg })).body
    expect(first).toMatchObject({ tareVersion: 2, tareN: 10, tareMeanMg: 96.1 })
    // Deviations −1, 0.1, 0.9, −1.3, 0.5, −0.6, 0, 1.1, −0.2, 0.5: squares sum to 5.62, so SD² = 5.62/9.
    expect(first.tareSdMg).toBeCloseTo(Math.sqrt(5.62 / 9), 3)
    expect(first.tareStandardErrorMg).toBeCloseTo(Math.sqrt(5.62 / 90), 3)
    const second = (await operator.post(`/api/shell-lots/${id}/tares`, { weightsMg: weightsMg.map((mg) => mg + 1) })).body
    expect(second.tareVersion).toBe(3)
    expect(second.tares.map(({ tareVersion }: { tareVersion: number }) => tareVersion)).toEqual([3, 2])
    expect(second.tares[1].weightsMg).toEqual(weightsMg)
  })

  test('the guard advises by the fill of the product’s own samples, or says that it does not know', async () => {
    const { id } = await buildShellLot(site)
    const heavy = await buildProduct(site, { targetFillMg: 400 })
    const light = await buildProduct(site, { targetFillMg: 60 })
    const operator = await api.as(site, 'operator')
    const { guards } = (await operator.get(`/api/shell-lots/${id}`)).body as {
      guards: { productId: string; advice: string; biasPercent: number }[]
    }
    expect(guards.find(({ productId }) => productId === heavy.id)).toMatchObject({ advice: 'unknown', samples: 0 })
    expect(guards.find(({ productId }) => productId === light.id)?.advice).toBe('individual-tare')
    // SD 2.5 of 50 shells: 2.5/√50 = 0.354 mg, of 400 mg.
    expect(guards.find(({ productId }) => productId === heavy.id)?.biasPercent).toBeCloseTo(0.0884, 4)
  })

  const upload = (caller: Caller, id: string, text: string | Buffer, fields: Record<string, string>) => {
    const request = caller.post(`/api/shell-lots/${id}/tare-files`)
    for (const [name, value] of Object.entries(fields)) void request.field(name, value)
    return request.attach('file', Buffer.from(text), 'shells.csv')
  }

  test('a CSV of one column makes a tare, in g with a decimal comma too', async () => {
    const { id } = await buildShellLot(site)
    const operator = await api.as(site, 'operator')
    const text = `Shell\r\n${weightsMg.map((mg) => (mg / 1000).toFixed(4).replace('.', ',')).join('\r\n')}\r\n`
    const answer = await upload(operator, id, text, { unit: 'g', decimal: ',' })
    expect(answer.status).toBe(201)
    expect(answer.body.tares[0].weightsMg).toEqual(weightsMg)
  })

  test('a CSV with a bad line is refused as a whole, by its line', async () => {
    const { id } = await buildShellLot(site)
    const operator = await api.as(site, 'operator')
    const answer = await upload(operator, id, `${weightsMg.join('\n')}\n=SUM(A1)\n`, { unit: 'mg' })
    expect(answer.status).toBe(422)
    expect(answer.body.issues[0]).toMatchObject({ row: 11 })
    expect((await upload(operator, id, '', { unit: 'mg' })).status).toBe(422)
    expect((await upload(operator, id, Buffer.from([0, 1, 2, 255]), { unit: 'mg' })).status).toBe(422)
    expect((await upload(operator, id, '96\n95\n', { unit: 'mg' })).body.issues[0].message).toMatch(/2 weights/)
    expect((await operator.get(`/api/shell-lots/${id}`)).body.tareVersion).toBe(1)
  })
})
