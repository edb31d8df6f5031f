import { c4, d2 } from './control-factors.ts'
import { chiSquareQuantile } from './distributions/chi-square.ts'
import { normalCumulative, normalQuantile } from './distributions/normal.ts'
import { requireFinite, requireShare, StatisticsError } from './errors.ts'
import { andersonDarling } from './normality.ts'
import { flattenSubgroups, momentsOfSubgroups, summariseSubgroups, type SubgroupColumns } from './subgroups.ts'

export type Interval = [number, number]

export interface CapabilityRequest {
  subgroups: readonly ArrayLike<number>[]
  lower?: number | undefined
  upper?: number | undefined
  target?: number | undefined
  /** Of the intervals; 0.95 when not said. */
  confidence?: number | undefined
  /** How the within-subgroup sigma is found; the pooled SD when not said. */
  estimator?: 'pooled' | 'rbar' | 'sbar' | undefined
}

export interface Capability {
  n: number
  mean: number
  sigmaWithin: number | null
  sigmaOverall: number
  cp: number | null
  cpk: number | null
  cpm: number | null
  pp: number | null
  ppk: number | null
  intervals: { cp: Interval | null; cpk: Interval | null; pp: Interval | null; ppk: Interval | null }
  /** Capsules in a million outside the limits, if the values are normal with the overall sigma. */
  expectedPpm: { below: number; above: number; total: number }
  /** Values in a million that were outside the limits. */
  observedPpm: number
  normality: { andersonDarling: number; pValue: number } | null
}

interface Limits {
  lower: number
  upper: number
}

/** Fewer values than this say nothing about a tail (common practice: 25 values or more for a first look). */
const FEWEST_VALUES = 5
const FEWEST_FOR_NORMALITY = 8

function checkedLimits({ lower, upper, target }: CapabilityRequest): Limits {
  for (const [name, value] of Object.entries({ lower, upper, target })) if (value !== undefined) requireFinite(name, value)
  if (lower === undefined && upper === undefined)
    throw new StatisticsError('too-few-values', 'lower', 'Capability needs a lower or an upper limit.')
  if (lower !== undefined && upper !== undefined && lower >= upper) {
    throw new StatisticsError('limits-crossed', 'lower', `The lower limit ${lower} must lie below the upper limit ${upper}.`)
  }
  return { lower: lower ?? -Infinity, upper: upper ?? Infinity }
}

interface Sigma {
  sigma: number
  df: number
}

function withinSigma(columns: SubgroupColumns, estimator: 'pooled' | 'rbar' | 'sbar'): Sigma | undefined {
  let df = 0
  let squares = 0
  let ratios = 0
  let groups = 0
  for (let point = 0; point < columns.n.length; point++) {
    const n = columns.n[point]!
    if (n < 2) continue
    df += n - 1
    groups++
    squares += (n - 1) * columns.sd[point]! ** 2
    if (estimator !== 'pooled') ratios += estimator === 'rbar' ? columns.range[point]! / d2(n) : columns.sd[point]! / c4(n)
  }
  if (df === 0) return undefined
  const sigma = estimator === 'pooled' ? Math.sqrt(squares / df) : ratios / groups
  return sigma > 0 ? { sigma, df } : undefined
}

/** Half widths are the smaller one where only one limit is given: the side without a limit is infinitely far. */
function indices(mean: number, { lower, upper }: Limits, { sigma }: Sigma): { spread: number | null; centred: number } {
  const width = upper - lower
  return { spread: Number.isFinite(width) ? width / (6 * sigma) : null, centred: Math.min(upper - mean, mean - lower) / (3 * sigma) }
}

/** Cp·√(χ²/df): the interval of a ratio to an estimated sigma. */
function spreadInterval(index: number | null, df: number, confidence: number): Interval | null {
  if (index === null) return null
  const alpha = 1 - confidence
  return [index * Math.sqrt(chiSquareQuantile(alpha / 2, df) / df), index * Math.sqrt(chiSquareQuantile(1 - alpha / 2, df) / df)]
}

/** Bissell's interval: index ± z·√(1/(9N) + index²/(2·df)). */
function centredInterval(index: number, n: number, df: number, confidence: number): Interval {
  const half = normalQuantile(0.5 + confidence / 2) * Math.sqrt(1 / (9 * n) + (index * index) / (2 * df))
  return [index - half, index + half]
}

function tails(mean: number, sigma: number, { lower, upper }: Limits): { below: number; above: number; total: number } {
  const below = Number.isFinite(lower) ? 1e6 * normalCumulative((lower - mean) / sigma) : 0
  const above = Number.isFinite(upper) ? 1e6 * normalCumulative((mean - upper) / sigma) : 0
  return { below, above, total: below + above }
}

function observedOutside(values: Float64Array, { lower, upper }: Limits): number {
  let outside = 0
  for (let place = 0; place < values.length; place++) if (values[place]! < lower || values[place]! > upper) outside++
  return (1e6 * outside) / values.length
}

/**
 * Capability of the process against its specification: within-subgroup indices (Cp, Cpk), overall ones (Pp, Ppk), Cpm about a
 * target, intervals, and what lies outside. Whether the process was stable enough for the figures to mean anything is told by
 * its control chart, not by this function.
 *
 * Formula  Cp = (U − L)/6σ, Cpk = min(U − x̄, x̄ − L)/3σ with the within sigma; Pp, Ppk with the overall SD (divisor n − 1);
 *          Cpm = (U − L)/(6·√(s² + (x̄ − T)²)). Intervals: χ² for Cp and Pp, Bissell for Cpk and Ppk.
 * @param request subgroups in one unit, at least five values in all; limits and target in the same unit
 * @returns indices without unit; `null` where a limit, a target or a within-subgroup spread is missing
 * @throws {StatisticsError} `too-few-values`, `not-finite`, `limits-crossed`, `no-variation`, `out-of-range`
 * @see A. F. Bissell, Applied Statistics 39 (1990) 331-340; D. C. Montgomery, Introduction to Statistical Quality Control, 6th ed., ch. 8; fixtures/reference/capability.json
 */
export function capability(request: CapabilityRequest): Capability {
  const { confidence = 0.95, estimator = 'pooled', target } = request
  requireShare('confidence', confidence)
  const limits = checkedLimits(request)
  const flat = flattenSubgroups(request.subgroups)
  if (flat.values.length < FEWEST_VALUES) {
    throw new StatisticsError(
      'too-few-values',
      'subgroups',
      `Capability needs at least ${FEWEST_VALUES} values, but there are ${flat.values.length}.`,
    )
  }
  const columns = summariseSubgroups(flat)
  const moments = momentsOfSubgroups(columns)
  const n = flat.values.length
  const overall: Sigma = { sigma: Math.sqrt(moments.sumOfSquares / (n - 1)), df: n - 1 }
  if (!(overall.sigma > 0)) throw new StatisticsError('no-variation', 'subgroups', 'All values are equal, so no index can be given.')
  const within = withinSigma(columns, estimator)
  const p = indices(moments.mean, limits, overall)
  const c = within && indices(moments.mean, limits, within)
  return {
    n,
    mean: moments.mean,
    sigmaWithin: within?.sigma ?? null,
    sigmaOverall: overall.sigma,
    cp: c?.spread ?? null,
    cpk: c?.centred ?? null,
    cpm:
      target === undefined || p.spread === null
        ? null
        : (limits.upper - limits.lower) / (6 * Math.hypot(overall.sigma, moments.mean - target)),
    pp: p.spread,
    ppk: p.centred,
    intervals: {
      cp: c && within ? spreadInterval(c.spread, within.df, confidence) : null,
      cpk: c && within ? centredInterval(c.centred, n, within.df, confidence) : null,
      pp: spreadInterval(p.spread, overall.df, confidence),
      ppk: centredInterval(p.centred, n, overall.df, confidence),
    },
    expectedPpm: tails(moments.mean, overall.sigma, limits),
    observedPpm: observedOutside(flat.values, limits),
    normality: n < FEWEST_FOR_NORMALITY ? null : normalityOf(flat.values),
  }
}

function normalityOf(values: Float64Array): { andersonDarling: number; pValue: number } {
  const { statistic, pValue } = andersonDarling(values)
  return { andersonDarling: statistic, pValue }
}
