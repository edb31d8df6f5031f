import { baselineMean, type Baseline, type Stretch } from '../baseline.ts'
import { estimateSigma, type Estimator } from '../sigma.ts'
import type { Panel } from './panel.ts'
import type { Samples } from './samples.ts'

export const PANEL_NAMES = ['location', 'spread', 'between'] as const
export type PanelName = (typeof PANEL_NAMES)[number]

/** The panels that a chart has; every chart has a location panel. */
export interface Panels {
  location: Panel
  spread?: Panel
  /** Moving ranges of subgroup means, beside the spread within subgroups. */
  between?: Panel
}

/** How a phase is judged, every choice made. */
export interface PhaseSettings {
  estimator: Estimator
  /** Known centre; undefined means the mean of the baseline. */
  target: number | undefined
  /** Known sigma of single values; undefined means estimated from the baseline. */
  sigma: number | undefined
  /** Known sigma of subgroup means, for the between/within chart. */
  sigmaOfMeans: number | undefined
  /** Weight of the newest mean, and the width of the limits in sigmas of the weighted mean. */
  ewma: { lambda: number; width: number }
  /** Allowance, decision value and head start, in sigmas of the subgroup mean. */
  cusum: { k: number; h: number; headStart: number }
}

/** What the baseline of a phase says. NaN stands for none. */
export interface PhaseFit {
  center: number
  sigmaWithin: number
  /** Standard deviation of subgroup means, with what varies between subgroups in it; only where the chart uses it. */
  sigmaOfMeans?: number
}

/** One sort of control chart. `index.ts` lists them all; menus, schemas and contract tests read that list. */
export interface ChartKind<Id extends string = string> {
  id: Id
  name: string
  /** One sentence: when this is the right chart. */
  use: string
  /** How many values a subgroup may hold. */
  sizes: { min: number; max: number }
  /** The estimators it can take for these subgroups, the usual one first. */
  estimators: (samples: Samples) => readonly [Estimator, ...Estimator[]]
  /** Its panels with the plotted points, the lines still empty. */
  panels: (samples: Samples) => Panels
  /** Centre and sigma from the baseline of a phase. */
  fit: (samples: Samples, baseline: Baseline, settings: PhaseSettings) => PhaseFit
  /** Draws centre and limits of a phase, and the points that depend on them. */
  limits: (panels: Panels, samples: Samples, stretch: Stretch, fit: PhaseFit, settings: PhaseSettings) => void
}

/** Estimators that read the spread within subgroups. */
export const WITHIN_SUBGROUPS = ['rbar', 'sbar', 'pooled'] as const satisfies readonly Estimator[]

/** The estimators for means of any size: neighbours where every subgroup is one value, otherwise the spread within. */
export function estimatorsForAnySize({ largest }: Samples): readonly [Estimator, ...Estimator[]] {
  return largest === 1 ? ['moving-range', 'median-moving-range'] : ['pooled', 'rbar', 'sbar']
}

/** The fit of most charts: target or mean of the baseline, known sigma or the estimator's. */
export function fitBaseline({ columns }: Samples, baseline: Baseline, { target, sigma, estimator }: PhaseSettings): PhaseFit {
  return { center: target ?? baselineMean(columns, baseline), sigmaWithin: sigma ?? estimateSigma(estimator, columns, baseline) }
}
