import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import { simulationPool } from '#server/workers/simulation-pool.ts'
import { buildSite } from '../build.ts'
import { startApi, type Caller } from './harness.ts'

let caller: Caller
beforeAll(async () => {
  const api = await startApi()
  caller = await api.as(await buildSite(), 'engineer')
})
afterAll(() => simulationPool().close())

interface Answer {
  status: number
  text: string
  body: unknown
}
async function ask(path: string, request: object): Promise<Answer> {
  const { status, text, body } = (await caller.post(`/api/calculations/${path}`, request)) as Answer
  return { status, text, body }
}
const ten = (value: number) => new Array<number>(10).fill(value)
const plan = { chart: 'xbar-s', n: 20, intervalMinutes: 30, capsulesPerHour: 57_600, sigmaMg: 8, tests: [1, 2, 5, 6] }
const trial = { settings: { 'penetration-4': 21, 'penetration-5': 18 }, meanMg: 390, sdMg: 8, n: 20 }

describe('requests that are refused', () => {
  test.each([
    ['uniformity', { standard: 'usp-906', contents: ten(100) }],
    ['uniformity', { standard: 'usp-905' }],
    ['uniformity', { standard: 'usp-905', contents: ten(100), actives: [{ active: 'first', contents: ten(100) }] }],
    ['uniformity', { standard: 'usp-905', contents: new Array<number>(12).fill(100) }],
    ['uniformity', { standard: 'usp-905-weight', weights: ten(0), assayPercent: 100 }],
    ['uniformity', { standard: 'ph-eur-2.9.5', net: ten(300), basis: 'net' }],
    ['pass-probability', { mean: 100, sd: -1, standard: 'usp-905' }],
    ['pass-probability', { mean: 100, sd: 5, standard: 'usp-905', lots: 100_000_000 }],
    ['pass-probability', { values: ten(100), confidence: 0.95 }],
    ['run-length', { chart: 'individuals', n: 5, shiftSigma: 0 }],
    ['run-length', { chart: 'xbar-r', n: 5, shiftSigma: 0, tests: [] }],
    ['operating-characteristic', { plan: { ...plan, sigmaMg: 0 }, changes: [{ shiftMg: 5 }] }],
    ['what-if', { plan, change: { shiftMg: 5 }, options: [] }],
    ['tuning', { history: [], target: 400 }],
    ['tuning', { history: [{ ...trial, settings: { constructor: 1 } }], target: 400 }],
    ['tuning', { history: [trial], target: 400, lever: 'penetration-9' }],
  ])('%s %j', async (path, body) => {
    const response = await ask(path, body)
    expect(response.status, response.text).toBe(422)
  })
})

test('a unit of two actives is judged as one and shown as two', async () => {
  const actives = [
    { active: 'first', contents: ten(100) },
    { active: 'second', contents: [80, 120, 80, 120, 80, 120, 80, 120, 80, 120] },
  ]
  const { status, body } = await ask('uniformity', { standard: 'usp-905', actives })
  expect(status).toBe(200)
  expect(body).toMatchObject({ verdict: 'test-20-more', basis: 'compendial', actives: [{ verdict: 'pass' }, { verdict: 'test-20-more' }] })
})

test('weights by mean tare come back as indicative, with their eligibility', async () => {
  const weights = [352, 348, 355, 349, 351, 347, 353, 350, 349, 351]
  const { body } = await ask('uniformity', {
    standard: 'usp-905-weight',
    weights,
    assayPercent: 99,
    claimMg: 200,
    weighingBasis: 'net-mean-tare',
  })
  expect(body).toMatchObject({ verdict: 'pass', basis: 'indicative', eligibility: { isEligible: true } })
})

test('a sample gives a lower bound with its region', async () => {
  const values = Array.from({ length: 30 }, (_, place) => 96 + (place % 9))
  const { status, body } = await ask('pass-probability', { values, confidence: 0.95, lots: 5_000 })
  expect(status).toBe(200)
  expect(body).toMatchObject({ n: 30, confidence: 0.95, lots: 5_000 })
  expect(body).toHaveProperty('sigmaUpper')
  expect(body).toHaveProperty('meanInterval')
})

test.each([
  { standard: 'usp-905-weight', mean: 400, sd: 10, assayPercent: 99, lots: 500 },
  { standard: 'usp-2091', mean: 400, sd: 10, shell: { mean: 96, sd: 2.5 }, lots: 500 },
  { standard: 'ph-eur-2.9.5', mean: 400, sd: 10, lots: 500 },
])('the chance of passing $standard', async (request) => {
  const { status, body } = await ask('pass-probability', request)
  expect(status).toBe(200)
  expect(body).toMatchObject({ probability: 1, lots: 500 })
})

test('a plan says what it sees and when, and the options what they cost', async () => {
  const seen = await ask('operating-characteristic', { plan, changes: [{ shiftMg: 5 }, { driftMgPerHour: 3.5 }] })
  expect(seen.status, seen.text).toBe(200)
  expect(seen.body).toMatchObject({ unchanged: { method: 'exact' }, changes: [{ shiftMg: 5 }, { driftMgPerHour: 3.5 }] })
  const options = [
    { n: 10, intervalMinutes: 30 },
    { n: 20, intervalMinutes: 15 },
  ]
  const whatIf = await ask('what-if', { plan, change: { shiftMg: 5 }, options })
  expect(whatIf.status, whatIf.text).toBe(200)
  expect(whatIf.body).toMatchObject([
    { n: 10, weighedPerHour: 20 },
    { n: 20, weighedPerHour: 80 },
  ])
})

test('tuning advises one move, with slopes, interval and cautions', async () => {
  const { status, body } = await ask('tuning', { history: [trial], target: 400 })
  expect(status).toBe(200)
  expect(Object.keys(body as object).toSorted()).toEqual(['cautions', 'recommendation', 'slopes'])
  expect(body).toHaveProperty('recommendation.interval.1')
})
