import { readdirSync } from 'node:fs'
import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import { simulationPool } from '#server/workers/simulation-pool.ts'
import { buildSite } from '../build.ts'
import { expectCase, loadCases, type ReferenceCase } from '../reference/compare.ts'
import { startApi, type Api, type Caller } from './harness.ts'

let api: Api
let caller: Caller
beforeAll(async () => {
  api = await startApi()
  caller = await api.as(await buildSite(), 'viewer')
})
afterAll(() => simulationPool().close())

const files = readdirSync(new URL('../../fixtures/reference', import.meta.url)).filter((name) => name.endsWith('.json'))
interface TopicCase extends ReferenceCase {
  topic: string
}
const cases = files
  .flatMap((name) => loadCases<TopicCase>(name.replace('.json', '')))
  .filter(({ endpoint }) => typeof endpoint === 'string')

test('the published record reaches the endpoints', () => expect(cases.length).toBeGreaterThan(300))

/** Cases of run tests speak of the location panel alone. */
function onLocation(answer: { signals: { panel: string }[] }): object {
  return { ...answer, signals: answer.signals.filter(({ panel }) => panel === 'location') }
}

const endpoints = [...new Set(cases.map(({ endpoint }) => String(endpoint)))]
describe.each(endpoints)('%s', (endpoint) => {
  test.each(cases.filter((each) => each.endpoint === endpoint))('$id', async (referenceCase) => {
    const response = await caller.post(endpoint.replace('POST ', ''), referenceCase.body)
    expect(response.status, response.text).toBe(200)
    const answer = response.body as { signals: { panel: string }[] }
    expectCase(referenceCase.topic === 'run-tests' ? onLocation(answer) : answer, referenceCase)
  })
})
