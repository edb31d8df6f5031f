import { z } from 'zod'
import { BATCH_STATES, CHART_KINDS, SAMPLE_KINDS, VERDICTS, WEIGHING_BASES } from '../vocabulary.ts'
import { Id, UtcTime } from './field.ts'
import { MachineEventAnswer } from './machine-events.ts'

const Interval = z.tuple([z.number(), z.number()])
const MaybeNumbers = z.array(z.number().nullable())

export const BatchChartQuery = z
  .strictObject({ chart: z.enum(CHART_KINDS).optional() })
  .meta({ id: 'BatchChartQuery', description: 'Which chart to draw; the one of the control plan by default.' })
export type BatchChartQuery = z.output<typeof BatchChartQuery>

const Panel = z.object({ points: MaybeNumbers, center: MaybeNumbers, lower: MaybeNumbers, upper: MaybeNumbers })

export const ChartPoint = z.object({
  id: Id,
  sequence: z.int(),
  kind: z.enum(SAMPLE_KINDS),
  startedAt: UtcTime,
  n: z.int(),
  meanMg: z.number(),
  sdMg: z.number().nullable(),
  rangeMg: z.number(),
  minMg: z.number(),
  maxMg: z.number(),
  verdict: z.enum(VERDICTS),
  capsulesMade: z.int().nullable(),
  isLate: z.boolean(),
  isExcluded: z.boolean(),
})

export const Drift = z
  .object({
    since: z.string(),
    fromPoint: z.int(),
    n: z.int(),
    perHour: z.number(),
    perHourInterval: Interval,
    perThousand: z.number().nullable(),
    perThousandInterval: Interval.nullable(),
    pValue: z.number(),
    interceptMg: z.number(),
    residualSdMg: z.number(),
    limitMg: z.number().nullable(),
    minutesToLimit: z.number().nullable(),
    capsulesToLimit: z.number().nullable(),
  })
  .meta({ id: 'Drift', description: 'How the mean moves within the present phase, with intervals that allow for autocorrelation.' })

export const ChangeEffect = z
  .object({
    label: z.string(),
    happenedAt: UtcTime,
    before: z.int(),
    after: z.int(),
    differenceMg: z.number(),
    intervalMg: Interval,
    pValue: z.number(),
    spreadDifferenceMg: z.number().nullable(),
    spreadIntervalMg: Interval.nullable(),
  })
  .meta({ id: 'ChangeEffect', description: 'Means and spreads of the samples before and after the last change, with intervals.' })

export const BatchChart = z
  .object({
    batch: z.object({
      id: Id,
      number: z.string(),
      state: z.enum(BATCH_STATES),
      machineCode: z.string(),
      productCode: z.string(),
      productName: z.string(),
      capsuleSize: z.string(),
      shellLotCode: z.string(),
      tareMeanMg: z.number().nullable(),
      toolingSetCode: z.string(),
      startedAt: UtcTime.nullable(),
      endedAt: UtcTime.nullable(),
      capsulesPerHour: z.number(),
    }),
    basis: z.enum(WEIGHING_BASES),
    chart: z.enum(CHART_KINDS),
    targetMg: z.number(),
    specificationMg: Interval,
    alertMg: Interval,
    actionMg: Interval,
    samples: z.array(ChartPoint),
    phases: z.array(
      z.object({
        from: z.int(),
        to: z.int(),
        label: z.string(),
        startedAt: UtcTime.nullable(),
        centerMg: z.number().nullable(),
        sigmaWithinMg: z.number().nullable(),
      }),
    ),
    location: Panel,
    spread: Panel.nullable(),
    spreadName: z.string(),
    signals: z.array(
      z.object({ point: z.int(), points: z.array(z.int()), panel: z.string(), test: z.int(), name: z.string(), sentence: z.string() }),
    ),
    noLimitsBecause: z.string().nullable(),
    events: z.array(MachineEventAnswer),
    drift: Drift.nullable(),
    change: ChangeEffect.nullable(),
  })
  .meta({ id: 'BatchChart', description: 'The control chart of a batch with its phases, limits, signals and events.' })
export type BatchChart = z.output<typeof BatchChart>

export const BatchCapability = z
  .object({
    n: z.int(),
    samples: z.int(),
    basis: z.enum(WEIGHING_BASES),
    lowerMg: z.number(),
    upperMg: z.number(),
    targetMg: z.number(),
    meanMg: z.number(),
    sdMg: z.number(),
    cp: z.number().nullable(),
    cpk: z.number().nullable(),
    pp: z.number().nullable(),
    ppk: z.number().nullable(),
    intervals: z.object({ cp: Interval.nullable(), cpk: Interval.nullable(), pp: Interval.nullable(), ppk: Interval.nullable() }),
    expectedPpm: z.number(),
    observedPpm: z.number(),
    normalityPValue: z.number().nullable(),
    isStable: z.boolean(),
    stability: z.string(),
    histogram: z.array(z.object({ fromMg: z.number(), toMg: z.number(), count: z.int() })),
  })
  .meta({
    id: 'BatchCapability',
    description: 'Capability of a batch against its specification, and whether the run was stable enough for it to mean anything.',
  })
export type BatchCapability = z.output<typeof BatchCapability>

export const BatchPositions = z
  .object({
    positions: z.array(
      z.object({ position: z.int(), n: z.int(), offsetMg: z.number(), lowerMg: z.number(), upperMg: z.number(), isOutside: z.boolean() }),
    ),
    samples: z.int(),
    sentence: z.string(),
  })
  .meta({ id: 'BatchPositions', description: 'How each position differs from the others, pooled over samples, with decision limits.' })
export type BatchPositions = z.output<typeof BatchPositions>
