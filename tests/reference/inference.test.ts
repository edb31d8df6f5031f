import { describe, test } from 'vitest'
import { analysisOfMeans } from '#shared/statistics/analysis-of-means.ts'
import { oneWayAnova } from '#shared/statistics/analysis-of-variance.ts'
import { lagOneAutocorrelation } from '#shared/statistics/autocorrelation.ts'
import { balanceRepeatability, minimumWeight, repeatabilityFor } from '#shared/statistics/balance.ts'
import { capability, type CapabilityRequest } from '#shared/statistics/capability.ts'
import { findChangePoint } from '#shared/statistics/change-point.ts'
import { brownForsythe, compareBeforeAfter } from '#shared/statistics/comparison.ts'
import { largestDeviationQuantile } from '#shared/statistics/distributions/largest-deviation.ts'
import { andersonDarling, shapiroWilk } from '#shared/statistics/normality.ts'
import { gaugeStudy, type Measurement } from '#shared/statistics/repeatability.ts'
import { toleranceInterval } from '#shared/statistics/tolerance-interval.ts'
import { trend } from '#shared/statistics/trend.ts'
import { expectCase, loadCases } from './compare.ts'

interface Published<Body> {
  id: string
  body: Body
  expected: unknown
  tolerance: { absolute: number } | { relative: number }
  note?: string
}

/** Runs every case of a file through the function behind its endpoint. */
function testCases<Body>(file: string, calculate: (body: Body) => unknown): void {
  describe(file, () => {
    test.each(loadCases<Published<Body>>(file).map((each) => [each.id, each] as const))('%s', (_id, each) => {
      expectCase(calculate(each.body), each)
    })
  })
}

testCases('capability', (body: CapabilityRequest) => capability(body))

const normality = ({ values, method }: { values: number[]; method: string }) => (method === 'shapiro-wilk' ? shapiroWilk(values) : andersonDarling(values))
testCases('normality', normality)
testCases('normality-datasets', normality)

testCases('tolerance', ({ values, ...options }: { values: number[]; coverage: number; confidence: number; sides: 1 | 2 }) => toleranceInterval(values, options))
testCases('means', ({ groups, alpha }: { groups: number[][]; alpha: number }) => analysisOfMeans(groups, alpha))
testCases('variance-components', ({ groups }: { groups: number[][] }) => oneWayAnova(groups))
testCases('anova', ({ groups }: { groups: number[][] }) => oneWayAnova(groups))
testCases('comparison', (body: { before: number[]; after: number[]; confidence: number }) => compareBeforeAfter(body))
testCases('change-point', ({ values }: { values: number[] }) => findChangePoint(values))
testCases('trend', (body: { x: number[]; y: number[]; confidence: number }) => trend(body))
testCases('trend-anscombe', (body: { x: number[]; y: number[]; confidence: number }) => trend(body))
testCases('repeatability', ({ measurements, tolerance }: { measurements: Measurement[]; tolerance?: number }) => gaugeStudy(measurements, tolerance))

interface WithInput<Input> extends Omit<Published<never>, 'body'> {
  input: Input
}

describe('autocorrelation', () => {
  const lists = new Map(loadCases<Published<{ values: number[] }>>('summary').map(({ id, body }) => [id, body.values]))
  test.each(loadCases<WithInput<{ valuesOf?: string; values?: number[] }>>('autocorrelation').map((each) => [each.id, each] as const))('%s', (_id, each) => {
    expectCase({ lag1: lagOneAutocorrelation(each.input.values ?? lists.get(each.input.valuesOf ?? '') ?? []) }, each)
  })
})

describe('change-point statistics', () => {
  test.each(loadCases<WithInput<{ values: number[] }>>('change-point-statistics').map((each) => [each.id, each] as const))('%s', (_id, each) => {
    const { statistic, ...rest } = findChangePoint(each.input.values)
    expectCase({ ...rest, minusTwoLogLikelihoodRatio: statistic }, each)
  })
})

interface BalanceInput {
  repeatabilityGrams?: number
  readabilityGrams: number
  weighingsGrams?: number[]
  smallestNetGrams?: number
}

describe('balance', () => {
  test.each(loadCases<WithInput<BalanceInput>>('balance').map((each) => [each.id, each] as const))('%s', (_id, { input, ...each }) => {
    const repeatability = input.repeatabilityGrams ?? balanceRepeatability(input.weighingsGrams ?? [])
    const balance = { repeatability, readability: input.readabilityGrams }
    const suitability = input.smallestNetGrams === undefined ? {} : repeatabilityFor(balance, input.smallestNetGrams)
    expectCase({ repeatabilityGrams: repeatability, minimumWeightGrams: minimumWeight(balance), ...suitability }, each)
  })
})

describe('spread', () => {
  const cases = loadCases<WithInput<{ groups?: number[][]; center?: string; alpha?: number; means?: number[]; df?: number }>>('spread-and-nesting')
  test.each(cases.filter(({ input }) => input.means !== undefined).map((each) => [each.id, each] as const))('%s', (_id, { input, ...each }) => {
    expectCase({ h: input.means?.map((k) => largestDeviationQuantile(input.alpha ?? NaN, k, input.df ?? NaN)) }, each)
  })
  test.each(cases.filter(({ id }) => id === 'gear-brown-forsythe').map((each) => [each.id, each] as const))('%s', (_id, { input, ...each }) => {
    expectCase(brownForsythe(input.groups ?? []), each)
  })
})
