import { z } from 'zod'
import { PANEL_NAMES } from '#shared/statistics/charts/chart-kind.ts'
import { CHART_IDS } from '#shared/statistics/charts/index.ts'
import { RUN_TEST_NUMBERS, RUN_TESTS } from '#shared/statistics/run-tests/index.ts'
import { ESTIMATORS } from '#shared/statistics/sigma.ts'

const UNIT = { 'x-unit': 'as the values' }
const IN_SIGMAS = { 'x-unit': 'sigmas of the plotted mean' }
const LARGEST_COUNT = 100_000

const Figure = z.number().meta(UNIT)
const PositiveFigure = z.number().positive().meta(UNIT)
const Point = z
  .int()
  .min(0)
  .max(LARGEST_COUNT - 1)
  .meta({ description: 'Counted from 0.' })
const TestNumber = z.literal([...RUN_TEST_NUMBERS]).meta({
  description: `Run tests: ${RUN_TESTS.map(({ number, title }) => `${number} ${title}`).join('; ')}.`,
})

export const ChartPhaseStart = z
  .strictObject({
    from: Point,
    label: z.string().max(200),
    target: Figure.optional(),
    sigma: PositiveFigure.optional(),
    sigmaOfMeans: PositiveFigure.optional(),
  })
  .meta({ id: 'ChartPhaseStart', description: 'A phase of a run, with its own limits; target and sigma where they are known.' })

export const LeftOutPoint = z
  .strictObject({ point: Point, reason: z.string().trim().min(1).max(500) })
  .meta({ id: 'LeftOutPoint', description: 'A point that is plotted and tested, but does not count for the limits, and why.' })

export const ControlChartRequest = z
  .strictObject({
    chart: z.enum(CHART_IDS),
    subgroups: z
      .array(z.array(z.number()).min(1).max(1_000))
      .min(1)
      .max(LARGEST_COUNT)
      .meta({ description: 'In the order of weighing; a single value is a subgroup of one.', ...UNIT }),
    estimator: z.enum(ESTIMATORS).optional().meta({ description: 'How sigma is estimated; the usual way of the chart by default.' }),
    target: Figure.optional().meta({ description: 'Known centre; by default the mean of the baseline.', ...UNIT }),
    sigma: PositiveFigure.optional().meta({ description: 'Known sigma of single values.', ...UNIT }),
    sigmaOfMeans: PositiveFigure.optional().meta({ description: 'Known sigma of subgroup means; between/within chart only.', ...UNIT }),
    tests: z.array(TestNumber).max(RUN_TESTS.length).optional().meta({ description: 'By default test 1 alone.' }),
    testLengths: z
      .array(z.strictObject({ test: TestNumber, length: z.int().min(1).max(100) }))
      .max(RUN_TESTS.length)
      .optional()
      .meta({ description: 'How many points make a pattern, where it is not the usual number.' }),
    ewma: z
      .strictObject({ lambda: z.number().positive().max(1), width: z.number().positive().max(100).meta(IN_SIGMAS) })
      .partial()
      .optional(),
    cusum: z
      .strictObject({
        k: z.number().min(0).max(100).meta(IN_SIGMAS),
        h: z.number().positive().max(1_000).meta(IN_SIGMAS),
        headStart: z.number().min(0).max(1_000).meta(IN_SIGMAS),
      })
      .partial()
      .optional(),
    phases: z.array(ChartPhaseStart).max(10_000).optional(),
    leaveOut: z.array(LeftOutPoint).max(LARGEST_COUNT).optional(),
  })
  .meta({ id: 'ControlChartRequest', description: 'Weights in subgroups, and the chart to draw of them.' })
export type ControlChartRequest = z.output<typeof ControlChartRequest>

const Figures = z.array(z.number().nullable()).meta({ description: 'One a point; null where there is none.', ...UNIT })
const Line = z
  .union([z.number(), z.null(), Figures])
  .meta({ description: 'One figure where it is the same at every point, otherwise one a point.', ...UNIT })

export const ChartPanel = z
  .object({
    points: Figures,
    center: Line,
    lower: Figures,
    upper: Figures,
    sigma: Line,
    tests: z.array(z.int()).meta({ description: 'The run tests that were run here: those asked for that mean something on this panel.' }),
    upperSums: Figures.optional(),
    lowerSums: Figures.optional(),
    decision: Line.optional(),
  })
  .meta({ id: 'ChartPanel', description: 'What is plotted, its centre line and its limits.' })

export const ChartPhase = z
  .object({
    from: z.int(),
    to: z.int().meta({ description: 'The point after the last of the phase.' }),
    label: z.string(),
    center: z.number().nullable().meta(UNIT),
    sigmaWithin: z.number().nullable().meta(UNIT),
    sigmaOfMeans: z.number().nullable().optional().meta(UNIT),
    sigmaBetween: z.number().nullable().optional().meta(UNIT),
    used: z.int().meta({ description: 'Subgroups that counted for the limits.' }),
    leftOut: z.array(z.object({ point: z.int(), reason: z.string() })),
  })
  .meta({ id: 'ChartPhase', description: 'A phase and what its limits were worked out from.' })

export const ChartSignal = z
  .object({
    point: z.int().meta({ description: 'The point that completes the pattern, counted from 0.' }),
    test: z.int(),
    panel: z.enum(PANEL_NAMES),
    points: z.array(z.int()).meta({ description: 'The points that make up the pattern.' }),
    name: z.string(),
    sentence: z.string(),
  })
  .meta({ id: 'ChartSignal', description: 'A point at which a run test raises its hand, and why.' })

export const ControlChartAnswer = z
  .object({
    chart: z.enum(CHART_IDS),
    estimator: z.enum(ESTIMATORS),
    sigmaWithin: z
      .number()
      .nullable()
      .meta({ description: 'Sigma of single values, of the last phase that has one.', ...UNIT }),
    phases: z.array(ChartPhase),
    location: ChartPanel,
    spread: ChartPanel.nullable().meta({ description: 'EWMA and CUSUM charts have none.' }),
    between: ChartPanel.optional().meta({ description: 'Moving ranges of subgroup means; between/within chart only.' }),
    signals: z.array(ChartSignal),
  })
  .meta({ id: 'ControlChartAnswer', description: 'A control chart with its limits a point at a time, and its signals.' })
export type ControlChartAnswer = z.output<typeof ControlChartAnswer>
