import type { z } from 'zod'
import {
  CapabilityAnswer,
  CapabilityRequest,
  ChangePointAnswer,
  ChangePointRequest,
  ComparisonAnswer,
  ComparisonRequest,
  MeansAnswer,
  MeansRequest,
  NormalityAnswer,
  NormalityRequest,
  RepeatabilityAnswer,
  RepeatabilityRequest,
  ToleranceIntervalAnswer,
  ToleranceIntervalRequest,
  TrendAnswer,
  TrendRequest,
  VarianceAnswer,
  VarianceRequest,
} from '#shared/schemas/calculations/inference.ts'
import { analysisOfMeans } from '#shared/statistics/analysis-of-means.ts'
import { oneWayAnova } from '#shared/statistics/analysis-of-variance.ts'
import { capability } from '#shared/statistics/capability.ts'
import { findChangePoint } from '#shared/statistics/change-point.ts'
import { compareBeforeAfter } from '#shared/statistics/comparison.ts'
import { andersonDarling, shapiroWilk } from '#shared/statistics/normality.ts'
import { gaugeStudy } from '#shared/statistics/repeatability.ts'
import { toleranceInterval } from '#shared/statistics/tolerance-interval.ts'
import { trend } from '#shared/statistics/trend.ts'
import { endpoint, type Endpoint } from '../../http/endpoint.ts'

/** A calculation without a database: what is sent is all it needs, and nothing is kept. */
function calculation<B, A>(
  name: string,
  summary: string,
  { body, answer }: { body: z.ZodType<B>; answer: z.ZodType<A> },
  calculate: (body: B) => A,
): Endpoint {
  return endpoint({
    method: 'post',
    path: `/calculations/${name}`,
    summary,
    allow: 'calculation:run',
    body,
    answer: { status: 200, schema: answer },
    handle: (call) => calculate(call.body),
  })
}

/** Everything that draws a conclusion from values: capability, intervals, tests, components. */
export const inferenceEndpoints = [
  calculation('capability', 'Capability against a specification', { body: CapabilityRequest, answer: CapabilityAnswer }, capability),
  calculation(
    'tolerance-interval',
    'An interval that holds a share of all capsules',
    { body: ToleranceIntervalRequest, answer: ToleranceIntervalAnswer },
    ({ values, ...options }) => toleranceInterval(values, options),
  ),
  calculation('normality', 'Whether values look normal', { body: NormalityRequest, answer: NormalityAnswer }, ({ values, method }) =>
    method === 'shapiro-wilk' ? shapiroWilk(values) : andersonDarling(values),
  ),
  calculation('variance', 'One-way analysis of variance', { body: VarianceRequest, answer: VarianceAnswer }, ({ groups }) =>
    oneWayAnova(groups),
  ),
  calculation('means', 'Analysis of means', { body: MeansRequest, answer: MeansAnswer }, ({ groups, alpha }) =>
    analysisOfMeans(groups, alpha),
  ),
  calculation('change-point', 'Where the mean changed', { body: ChangePointRequest, answer: ChangePointAnswer }, ({ values }) =>
    findChangePoint(values),
  ),
  calculation('comparison', 'Before and after a change', { body: ComparisonRequest, answer: ComparisonAnswer }, compareBeforeAfter),
  calculation('trend', 'A drift with its interval', { body: TrendRequest, answer: TrendAnswer }, trend),
  calculation(
    'repeatability',
    'Repeatability and reproducibility',
    { body: RepeatabilityRequest, answer: RepeatabilityAnswer },
    ({ measurements, tolerance }) => gaugeStudy(measurements, tolerance),
  ),
]
