import { requireFinite, requirePositive, StatisticsError } from '../errors.ts'
import { chooseTests, findSignals, testsFor, type ChosenTest, type Signal } from '../run-tests/find-signals.ts'
import { ESTIMATORS, type Estimator } from '../sigma.ts'
import { LARGEST_MAGNITUDE, type SubgroupColumns } from '../subgroups.ts'
import type { ChartKind, Panels, PhaseFit, PhaseSettings } from './chart-kind.ts'
import { CHART_IDS, CHARTS, type ChartId } from './index.ts'
import type { Panel } from './panel.ts'
import { phasesOf, type LeftOut, type Phase, type PhaseStart } from './phases.ts'
import { requireSizes, samplesOf, type Samples } from './samples.ts'

/** Everything that a control chart can be told beside its subgroups. Only `chart` is needed. */
export interface ChartOptions {
  chart: ChartId
  /** How sigma is estimated; the chart's usual way by default. */
  estimator?: Estimator | undefined
  /** Known centre, in the unit of the values. */
  target?: number | undefined
  /** Known sigma of single values. */
  sigma?: number | undefined
  /** Known sigma of subgroup means, for the between/within chart. */
  sigmaOfMeans?: number | undefined
  /** Run tests by number; by default only test 1, a point beyond its limits. */
  tests?: readonly number[] | undefined
  testLengths?: readonly { test: number; length: number }[] | undefined
  ewma?: { lambda?: number | undefined; width?: number | undefined } | undefined
  cusum?: { k?: number | undefined; h?: number | undefined; headStart?: number | undefined } | undefined
  phases?: readonly PhaseStart[] | undefined
  leaveOut?: readonly LeftOut[] | undefined
}

export interface FittedPhase extends Phase {
  fit: PhaseFit
}

/** A drawn chart, its lines in typed arrays; NaN stands for none. */
export interface DrawnChart {
  kind: ChartKind<ChartId>
  samples: Samples
  estimator: Estimator
  phases: FittedPhase[]
  panels: Panels
  signals: Signal[]
  /** The tests that were run on a panel: those asked for that are valid there. */
  testsOn: (panel: Panel) => ChosenTest[]
}

/** Where a request does not say: the values in most common use. */
const USUAL_EWMA = { lambda: 0.2, width: 3 }
const USUAL_CUSUM = { k: 0.5, h: 5, headStart: 0 }

/**
 * Draws a control chart from the figures of its subgroups, without their weights: phases, limits, signals.
 * Each phase has its own centre, sigma and limits; linear time, a handful of columns.
 * @param columns n, mean, SD and range of each subgroup, in order; from {@link summariseSubgroups} or from stored samples
 * @param options which chart, and what is known
 * @throws {StatisticsError} `unknown-option`, `not-supported`, `too-few-values` (also when no phase has enough points for limits),
 *         `too-many-values`, `not-finite`, `not-positive`, `not-whole`, `out-of-range`
 * @see the files of this folder for each chart's formula and source
 */
export function drawChart(columns: SubgroupColumns, options: ChartOptions): DrawnChart {
  const kind = chartCalled(options.chart)
  const samples = samplesOf(columns)
  requireSizes(samples, kind.sizes)
  const estimator = chooseEstimator(kind, samples, options.estimator)
  const chosen = chooseTests(options.tests ?? [1], options.testLengths)
  const panels = kind.panels(samples)
  const phases = phasesOf(samples.count, options.phases ?? [], options.leaveOut ?? []).map((phase) => {
    const settings = settingsOf(phase, options, estimator)
    const fit = kind.fit(samples, phase, settings)
    kind.limits(panels, samples, phase, fit, settings)
    return { ...phase, fit }
  })
  if (phases.every(({ fit }) => Number.isNaN(fit.sigmaWithin) || Number.isNaN(fit.sigmaOfMeans ?? fit.center))) {
    throw new StatisticsError(
      'too-few-values',
      'subgroups',
      'subgroups holds too few points to work out limits; give sigma, or more points.',
    )
  }
  const signals = findSignals(panels, phases, chosen)
  return { kind, samples, estimator, phases, panels, signals, testsOn: (panel) => testsFor(panel, chosen) }
}

function chartCalled(id: string): ChartKind<ChartId> {
  const kind = CHARTS.find((chart) => chart.id === id)
  if (kind) return kind
  throw new StatisticsError('unknown-option', 'chart', `chart must be one of ${CHART_IDS.join(', ')}, but is ${id}.`)
}

function chooseEstimator(kind: ChartKind, samples: Samples, wanted: Estimator | undefined): Estimator {
  const possible = kind.estimators(samples)
  if (wanted === undefined) return possible[0]
  if (possible.includes(wanted)) return wanted
  const code = ESTIMATORS.includes(wanted) ? 'not-supported' : 'unknown-option'
  throw new StatisticsError(code, 'estimator', `estimator must be one of ${possible.join(', ')} for this chart, but is ${wanted}.`)
}

function settingsOf(phase: Phase, options: ChartOptions, estimator: Estimator): PhaseSettings {
  const target = phase.target ?? options.target
  const sigma = phase.sigma ?? options.sigma
  const sigmaOfMeans = phase.sigmaOfMeans ?? options.sigmaOfMeans
  if (target !== undefined) requireModest('target', target)
  if (sigma !== undefined) requirePositiveModest('sigma', sigma)
  if (sigmaOfMeans !== undefined) requirePositiveModest('sigmaOfMeans', sigmaOfMeans)
  return { estimator, target, sigma, sigmaOfMeans, ewma: ewmaSettings(options), cusum: cusumSettings(options) }
}

function ewmaSettings({ ewma }: ChartOptions): PhaseSettings['ewma'] {
  const lambda = ewma?.lambda ?? USUAL_EWMA.lambda
  const width = ewma?.width ?? USUAL_EWMA.width
  requireWithin('ewma.lambda', lambda, 0, 1)
  requirePositive('ewma.lambda', lambda)
  requireWithin('ewma.width', width, 0, 100)
  requirePositive('ewma.width', width)
  return { lambda, width }
}

function cusumSettings({ cusum }: ChartOptions): PhaseSettings['cusum'] {
  const k = cusum?.k ?? USUAL_CUSUM.k
  const h = cusum?.h ?? USUAL_CUSUM.h
  const headStart = cusum?.headStart ?? USUAL_CUSUM.headStart
  requireWithin('cusum.k', k, 0, 100)
  requireWithin('cusum.h', h, 0, 1000)
  requirePositive('cusum.h', h)
  requireWithin('cusum.headStart', headStart, 0, h)
  return { k, h, headStart }
}

function requireWithin(argument: string, value: number, min: number, max: number): void {
  requireFinite(argument, value)
  if (value >= min && value <= max) return
  throw new StatisticsError('out-of-range', argument, `${argument} must lie from ${min} to ${max}, but is ${value}.`)
}

function requireModest(argument: string, value: number): void {
  requireWithin(argument, value, -LARGEST_MAGNITUDE, LARGEST_MAGNITUDE)
}

function requirePositiveModest(argument: string, value: number): void {
  requirePositive(argument, value)
  requireModest(argument, value)
}
