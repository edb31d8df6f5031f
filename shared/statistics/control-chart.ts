import { countUsed } from './baseline.ts'
import type { PanelName } from './charts/chart-kind.ts'
import { drawChart, type ChartOptions, type DrawnChart, type FittedPhase } from './charts/draw-chart.ts'
import type { ChartId } from './charts/index.ts'
import type { Panel } from './charts/panel.ts'
import type { LeftOut } from './charts/phases.ts'
import type { Signal } from './run-tests/find-signals.ts'
import type { Estimator } from './sigma.ts'
import { flattenSubgroups, summariseSubgroups } from './subgroups.ts'

/** A chart to draw: its weights in subgroups, in the order of weighing, and what is known. */
export interface ControlChartRequest extends ChartOptions {
  subgroups: readonly ArrayLike<number>[]
}

/** A line of a chart: one figure where it is the same at every point, else one a point; null where there is none. */
export type Line = number | null | (number | null)[]

/** A panel as an answer carries it. Units are those of the values. */
export interface PanelAnswer {
  points: (number | null)[]
  center: Line
  lower: (number | null)[]
  upper: (number | null)[]
  /** Standard deviation of the plotted point. */
  sigma: Line
  /** The run tests that were run here: those asked for that mean something on this panel. */
  tests: number[]
  /** The sums of a CUSUM chart, both positive, and the value that neither may pass. */
  upperSums?: (number | null)[]
  lowerSums?: (number | null)[]
  decision?: Line
}

export interface PhaseAnswer {
  from: number
  /** The point after its last. */
  to: number
  label: string
  center: number | null
  sigmaWithin: number | null
  /** Standard deviation of subgroup means and, from it, of what varies between subgroups alone: between/within chart only. */
  sigmaOfMeans?: number | null
  sigmaBetween?: number | null
  /** Subgroups that counted for the limits. */
  used: number
  leftOut: LeftOut[]
}

export interface ControlChartAnswer {
  chart: ChartId
  estimator: Estimator
  /** Of the last phase that has one. */
  sigmaWithin: number | null
  phases: PhaseAnswer[]
  location: PanelAnswer
  /** EWMA and CUSUM charts have none. */
  spread: PanelAnswer | null
  /** Moving ranges of subgroup means: between/within chart only. */
  between?: PanelAnswer
  signals: Signal[]
}

/**
 * Draws a control chart from weights: sigma, limits a point at a time, and signals, phase by phase.
 * @param request chart, subgroups and options; see {@link ChartOptions}
 * @returns plain arrays, null where there is no figure (a phase too short for limits, the first moving range)
 * @throws {StatisticsError} as {@link drawChart} and {@link summariseSubgroups}
 * @see docs/calculations/control-charts.md
 */
export function controlChart({ subgroups, ...options }: ControlChartRequest): ControlChartAnswer {
  return answerOf(drawChart(summariseSubgroups(flattenSubgroups(subgroups)), options))
}

/**
 * Turns a drawn chart into plain arrays, ready to be sent.
 * @param drawn from {@link drawChart}
 */
export function answerOf(drawn: DrawnChart): ControlChartAnswer {
  const { kind, estimator, panels, signals } = drawn
  const phases = drawn.phases.map((phase) => phaseAnswer(phase, drawn))
  const sigmaWithin = phases.findLast((phase) => phase.sigmaWithin !== null)?.sigmaWithin ?? null
  const answerFor = (panel: Panel): PanelAnswer => panelAnswer(panel, drawn)
  const answer = { chart: kind.id, estimator, sigmaWithin, phases, location: answerFor(panels.location), signals }
  const spread = panels.spread ? answerFor(panels.spread) : null
  return panels.between ? { ...answer, spread, between: answerFor(panels.between) } : { ...answer, spread }
}

/**
 * A line's figure at one point.
 * @param line of a panel
 * @param point counted from 0
 */
export function lineAt(line: Line, point: number): number | null {
  return Array.isArray(line) ? (line[point] ?? null) : line
}

/** The panels of an answer by name, those that it has. */
export function panelsOf(answer: ControlChartAnswer): [PanelName, PanelAnswer][] {
  const named: [PanelName, PanelAnswer | null | undefined][] = [
    ['location', answer.location],
    ['spread', answer.spread],
    ['between', answer.between],
  ]
  return named.flatMap(([name, panel]) => (panel ? [[name, panel]] : []))
}

function panelAnswer(panel: Panel, { testsOn }: DrawnChart): PanelAnswer {
  const { points, center, lower, upper, sigma, sums } = panel
  const answer = {
    points: listOf(points),
    center: lineOf(center),
    lower: listOf(lower),
    upper: listOf(upper),
    sigma: lineOf(sigma),
    tests: testsOn(panel).map(({ test }) => test.number),
  }
  if (!sums) return answer
  return { ...answer, upperSums: listOf(sums.upper), lowerSums: listOf(sums.lower), decision: lineOf(sums.decision) }
}

function phaseAnswer(phase: FittedPhase, { samples }: DrawnChart): PhaseAnswer {
  const { from, to, label, fit, leftOutWhy } = phase
  const answer = {
    from,
    to,
    label,
    center: orNull(fit.center),
    sigmaWithin: orNull(fit.sigmaWithin),
    used: countUsed(phase),
    leftOut: leftOutWhy,
  }
  if (fit.sigmaOfMeans === undefined) return answer
  const meanOfReciprocals = samples.columns.n.subarray(from, to).reduce((sum, n) => sum + 1 / n, 0) / (to - from)
  const between = Math.sqrt(Math.max(0, fit.sigmaOfMeans ** 2 - fit.sigmaWithin ** 2 * meanOfReciprocals))
  return { ...answer, sigmaOfMeans: orNull(fit.sigmaOfMeans), sigmaBetween: orNull(between) }
}

function orNull(figure: number): number | null {
  return Number.isNaN(figure) ? null : figure
}

function listOf(figures: Float64Array): (number | null)[] {
  return Array.from(figures, orNull)
}

function lineOf(figures: Float64Array): Line {
  const first = figures[0]!
  return figures.every((figure) => Object.is(figure, first)) ? orNull(first) : listOf(figures)
}
