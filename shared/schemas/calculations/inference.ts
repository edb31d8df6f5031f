import { z } from 'zod'

const MOST_VALUES = 1_000_000
const Values = z.array(z.number()).max(MOST_VALUES)
const Confidence = z.number().gt(0).lt(1)
const Interval = z.tuple([z.number(), z.number()])

export const CapabilityRequest = z
  .strictObject({
    subgroups: z.array(z.array(z.number()).max(1_000)).min(1).max(100_000),
    lower: z.number().optional(),
    upper: z.number().optional(),
    target: z.number().optional(),
    confidence: Confidence.optional(),
    estimator: z.enum(['pooled', 'rbar', 'sbar']).optional(),
  })
  .meta({ id: 'CapabilityRequest', description: 'Values in subgroups and the limits they have to keep, in one unit.' })

export const CapabilityAnswer = z
  .object({
    n: z.int(),
    mean: z.number(),
    sigmaWithin: z.number().nullable(),
    sigmaOverall: z.number(),
    cp: z.number().nullable(),
    cpk: z.number().nullable(),
    cpm: z.number().nullable(),
    pp: z.number().nullable(),
    ppk: z.number().nullable(),
    intervals: z.object({ cp: Interval.nullable(), cpk: Interval.nullable(), pp: Interval.nullable(), ppk: Interval.nullable() }),
    expectedPpm: z.object({ below: z.number(), above: z.number(), total: z.number() }),
    observedPpm: z.number(),
    normality: z.object({ andersonDarling: z.number(), pValue: z.number() }).nullable(),
  })
  .meta({ id: 'CapabilityAnswer', description: 'Capability indices with intervals, and what lies outside.' })

export const ToleranceIntervalRequest = z
  .strictObject({ values: Values, coverage: Confidence, confidence: Confidence, sides: z.union([z.literal(1), z.literal(2)]) })
  .meta({ id: 'ToleranceIntervalRequest', description: 'A sample, the share to be covered and the confidence.' })
export const ToleranceIntervalAnswer = z
  .object({ k: z.number(), lower: z.number(), upper: z.number() })
  .meta({ id: 'ToleranceIntervalAnswer', description: 'The factor and the bounds.' })

export const NormalityRequest = z
  .strictObject({ values: Values, method: z.enum(['anderson-darling', 'shapiro-wilk']) })
  .meta({ id: 'NormalityRequest', description: 'A sample and the test of its shape.' })
export const NormalityAnswer = z
  .object({ statistic: z.number(), pValue: z.number() })
  .meta({ id: 'NormalityAnswer', description: 'The statistic and its p-value.' })

const Groups = z.array(Values).min(1).max(10_000)
const MeanSquare = z.object({ df: z.int(), ss: z.number(), ms: z.number() })
export const VarianceRequest = z.strictObject({ groups: Groups }).meta({ id: 'VarianceRequest', description: 'Values in groups.' })
export const VarianceAnswer = z
  .object({
    between: MeanSquare,
    within: MeanSquare,
    f: z.number().nullable(),
    pValue: z.number().nullable(),
    components: z.object({ between: z.number(), within: z.number() }),
    iccPercent: z.number().nullable(),
  })
  .meta({ id: 'VarianceAnswer', description: 'One-way analysis of variance with its components.' })

export const MeansRequest = z
  .strictObject({ groups: Groups.max(200), alpha: Confidence })
  .meta({ id: 'MeansRequest', description: 'Groups whose means are compared with the grand mean.' })
export const MeansAnswer = z
  .object({
    grandMean: z.number(),
    means: z.array(z.number()),
    lower: z.array(z.number()),
    upper: z.array(z.number()),
    outside: z.array(z.int()),
    h: z.number(),
  })
  .meta({ id: 'MeansAnswer', description: 'Analysis of means with decision limits.' })

const Side = z.object({ n: z.int(), mean: z.number(), sd: z.number().nullable() })
export const ChangePointRequest = z
  .strictObject({ values: Values.max(100_000) })
  .meta({ id: 'ChangePointRequest', description: 'Values in order.' })
export const ChangePointAnswer = z
  .object({
    index: z.int(),
    statistic: z.number(),
    maximumT: z.number(),
    pValue: z.number(),
    interval: Interval,
    before: Side,
    after: Side,
  })
  .meta({ id: 'ChangePointAnswer', description: 'The one place where the mean changed, if it did.' })

export const ComparisonRequest = z
  .strictObject({ before: Values, after: Values, confidence: Confidence })
  .meta({ id: 'ComparisonRequest', description: 'Values before and after a change.' })
export const ComparisonAnswer = z
  .object({
    difference: z.number(),
    interval: Interval,
    t: z.number(),
    df: z.number(),
    pValue: z.number(),
    varianceRatio: z.number().nullable(),
    spreadPValue: z.number().nullable(),
  })
  .meta({ id: 'ComparisonAnswer', description: 'The difference of the means with its interval, and whether the spread changed.' })

export const TrendRequest = z
  .strictObject({ x: Values, y: Values, confidence: Confidence })
  .meta({ id: 'TrendRequest', description: 'Points of a drift.' })
export const TrendAnswer = z
  .object({
    slope: z.number(),
    interval: Interval,
    intercept: z.number(),
    pValue: z.number(),
    theilSen: z.number(),
    kendallTau: z.number(),
    mannKendallPValue: z.number(),
    residualAutocorrelation: z.number().nullable(),
    autocorrelationInterval: Interval,
    residualSd: z.number(),
  })
  .meta({ id: 'TrendAnswer', description: 'The slope, plain and robust, with intervals.' })

export const RepeatabilityRequest = z
  .strictObject({
    measurements: z.array(z.strictObject({ part: z.string().max(40), appraiser: z.string().max(40), value: z.number() })).max(10_000),
    tolerance: z.number().positive().optional(),
  })
  .meta({ id: 'RepeatabilityRequest', description: 'Parts measured by several people several times.' })
export const RepeatabilityAnswer = z
  .object({
    components: z.object({
      repeatability: z.number(),
      reproducibility: z.number(),
      interaction: z.number(),
      part: z.number(),
      total: z.number(),
    }),
    percentStudy: z.object({ repeatability: z.number(), reproducibility: z.number(), gauge: z.number(), part: z.number() }),
    percentTolerance: z.number().nullable(),
    distinctCategories: z.int(),
    isInteractionPooled: z.boolean(),
  })
  .meta({ id: 'RepeatabilityAnswer', description: 'A gauge study by analysis of variance.' })
