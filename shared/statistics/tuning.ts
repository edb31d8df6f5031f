import { CholeskyDecomposition, Matrix } from 'ml-matrix'
import { normalCumulative } from './distributions/normal.ts'
import { requireFinite, requirePositive, requireShare, requireWhole, StatisticsError } from './errors.ts'

/** One trial: the settings it ran at, and the sample that was weighed. */
export interface Trial {
  /** Any names; a setting that a trial leaves out stays where it was. */
  settings: Readonly<Record<string, number>>
  meanMg: number
  sdMg: number
  n: number
}

/** What is believed of a slope before any trial, mg per unit of the setting: normal with this mean and SD. */
export interface SlopePrior {
  mgPerUnit: number
  sd: number
}

export interface Slope extends SlopePrior {
  /** 95 % credible interval. */
  interval: [number, number]
}

export interface Prediction {
  meanMg: number
  /** SD of the level at these settings, without the scatter of the next trial. */
  levelSd: number
  /** 95 % interval of the mean of the next sample. */
  interval: [number, number]
}

export interface TuningModel {
  /** The settings of the last trial. */
  current: Record<string, number>
  slopes: Record<string, Slope>
  /** The mean that a sample of n capsules with this SD would show at these settings; those left out stay as they are. */
  predict: (settings: Readonly<Record<string, number>>, sample: { n: number; sdMg: number }) => Prediction
}

interface Component {
  /** Posterior weight of this scatter between trials. */
  weight: number
  scatter: number
  mean: number[]
  covariance: Matrix
}

const CREDIBILITY = 0.95
const SCATTER_STEPS = 60
/** Scatter between trials that the settings do not explain: half-normal with this share of the target as its scale. */
const SCATTER_SHARE = 0.01
/** The level itself is nearly unknown beforehand: SD half the target. */
const LEVEL_SHARE = 0.5

/**
 * Bayesian linear regression of the sample mean on the settings.
 *
 * Model    meanᵢ = level + Σⱼ slopeⱼ·(settingᵢⱼ − current settingⱼ) + eᵢ, eᵢ normal with variance τ² + sdᵢ²/nᵢ;
 *          slopes normal beforehand as `priors` says, level normal around the target with an SD of half of it,
 *          τ half-normal with a scale of 1 % of the target.
 * Method   for each of 60 values of τ the posterior of level and slopes is normal in closed form; the 60 are mixed by their
 *          posterior weight. Intervals are quantiles of the mixture.
 * @param history trials in their order, at least one
 * @param priors one for each setting that occurs
 * @param target mg
 * @throws {StatisticsError} `too-few-values`, `not-finite`, `not-positive`, `not-whole`, `out-of-range`, `unknown-option` where a prior is missing
 * @see A. Gelman et al., Bayesian Data Analysis, 3rd ed., ch. 14 (cited from memory); docs/calculations/tuning.md
 */
export function fitTuning(history: readonly Trial[], priors: Readonly<Record<string, SlopePrior>>, target: number): TuningModel {
  requirePositive('target', target)
  checkHistory(history)
  const levers = [...new Set(history.flatMap(({ settings }) => Object.keys(settings)))]
  const filled = fillSettings(history, levers)
  const current = filled.at(-1)!
  const prior = levers.map((lever) => priorOf(lever, priors))
  const design = new Matrix(filled.map((settings) => [1, ...levers.map((lever) => settings[lever]! - current[lever]!)]))
  const mixture = mix(design, history, [{ mgPerUnit: target, sd: LEVEL_SHARE * target }, ...prior], SCATTER_SHARE * target)
  const slopes = levers.map((lever, place): [string, Slope] => [lever, slopeAt(mixture, place + 1)])
  return {
    current,
    slopes: Object.fromEntries(slopes),
    predict: (settings, sample) => {
      const row = [1, ...levers.map((lever) => (settings[lever] ?? current[lever]!) - current[lever]!)]
      return predictAt(mixture, row, (sample.sdMg * sample.sdMg) / sample.n)
    },
  }
}

function checkHistory(history: readonly Trial[]): void {
  if (history.length === 0) throw new StatisticsError('too-few-values', 'history', 'history needs at least one trial.')
  if (history.length > 1000) throw new StatisticsError('too-many-values', 'history', 'history can hold at most 1000 trials.')
  history.forEach(({ settings, meanMg, sdMg, n }, place) => {
    const at = `history[${place}]`
    requirePositive(`${at}.meanMg`, meanMg)
    requireFinite(`${at}.sdMg`, sdMg)
    if (sdMg < 0) throw new StatisticsError('out-of-range', `${at}.sdMg`, `${at}.sdMg cannot be negative.`)
    requireWhole(`${at}.n`, n, { min: 2, max: 100_000 })
    for (const [lever, setting] of Object.entries(settings)) requireFinite(`${at}.settings.${lever}`, setting)
  })
}

/** Each trial with all settings: what it leaves out stays as it was, and before its first mention as it was then. */
function fillSettings(history: readonly Trial[], levers: readonly string[]): Record<string, number>[] {
  const first = (lever: string) => history.find(({ settings }) => settings[lever] !== undefined)!.settings[lever]!
  let known: Record<string, number> = Object.fromEntries(levers.map((lever) => [lever, first(lever)]))
  return history.map(({ settings }) => (known = { ...known, ...settings }))
}

function priorOf(lever: string, priors: Readonly<Record<string, SlopePrior>>): SlopePrior {
  const prior = priors[lever]
  if (!prior) throw new StatisticsError('unknown-option', `priors.${lever}`, `There is no prior for the setting ${lever}.`)
  requireFinite(`priors.${lever}.mgPerUnit`, prior.mgPerUnit)
  requirePositive(`priors.${lever}.sd`, prior.sd)
  return prior
}

function mix(design: Matrix, history: readonly Trial[], prior: readonly SlopePrior[], scale: number): Component[] {
  const components = Array.from({ length: SCATTER_STEPS }, (_, step) => {
    const scatter = ((step + 0.5) / SCATTER_STEPS) * 4 * scale
    const { logWeight, ...posterior } = posteriorGiven(scatter, design, history, prior)
    return { ...posterior, scatter, logWeight: logWeight - 0.5 * (scatter / scale) ** 2 }
  })
  const highest = Math.max(...components.map(({ logWeight }) => logWeight))
  const total = components.reduce((sum, { logWeight }) => sum + Math.exp(logWeight - highest), 0)
  return components.map(({ logWeight, ...rest }) => ({ ...rest, weight: Math.exp(logWeight - highest) / total }))
}

/** The posterior for a known scatter, and the logarithm of how well that scatter explains the means. */
function posteriorGiven(
  scatter: number,
  design: Matrix,
  history: readonly Trial[],
  prior: readonly SlopePrior[],
): { logWeight: number; mean: number[]; covariance: Matrix } {
  const variances = history.map(({ sdMg, n }) => scatter * scatter + (sdMg * sdMg) / n)
  const believed = prior.map(({ mgPerUnit }) => mgPerUnit)
  // Working on the distance from what was believed keeps the digits that matter.
  const surprise = history.map(({ meanMg }, row) => meanMg - dot(design.getRow(row), believed))
  const size = prior.length
  const precision = Matrix.diag(prior.map(({ sd }) => 1 / (sd * sd)))
  const pull = Matrix.zeros(size, 1)
  history.forEach((_, row) => {
    const values = design.getRow(row)
    for (let i = 0; i < size; i++) {
      pull.set(i, 0, pull.get(i, 0) + (values[i]! * surprise[row]!) / variances[row]!)
      for (let j = 0; j < size; j++) precision.set(i, j, precision.get(i, j) + (values[i]! * values[j]!) / variances[row]!)
    }
  })
  if (![...precision.to1DArray(), ...pull.to1DArray()].every(Number.isFinite)) throw tooFarApart()
  const cholesky = new CholeskyDecomposition(precision)
  if (!cholesky.isPositiveDefinite()) throw tooFarApart()
  const shift = cholesky.solve(pull).to1DArray()
  const logDeterminant = 2 * cholesky.lowerTriangularMatrix.diagonal().reduce((sum, value) => sum + Math.log(value), 0)
  const misfit = surprise.reduce((sum, value, row) => sum + (value * value) / variances[row]!, 0) - dot(pull.to1DArray(), shift)
  const logScatter = variances.reduce((sum, value) => sum + Math.log(value), 0)
  return {
    logWeight: -0.5 * (logScatter + logDeterminant + misfit),
    mean: believed.map((value, place) => value + shift[place]!),
    covariance: cholesky.solve(Matrix.eye(size)),
  }
}

function tooFarApart(): StatisticsError {
  return new StatisticsError('out-of-range', 'history', 'Settings, weights and beliefs are too far apart in size to be calculated with.')
}

function dot(first: readonly number[], second: readonly number[]): number {
  return first.reduce((sum, value, place) => sum + value * second[place]!, 0)
}

interface Normal {
  weight: number
  mean: number
  sd: number
}

function slopeAt(mixture: readonly Component[], place: number): Slope {
  const parts = mixture.map(({ weight, mean, covariance }) => ({ weight, mean: mean[place]!, sd: Math.sqrt(covariance.get(place, place)) }))
  const { mean, sd } = momentsOfMixture(parts)
  if (!Number.isFinite(mean) || !Number.isFinite(sd)) throw tooFarApart()
  return { mgPerUnit: mean, sd, interval: intervalOfMixture(parts) }
}

function predictAt(mixture: readonly Component[], row: readonly number[], sampling: number): Prediction {
  const parts = mixture.map(({ weight, scatter, mean, covariance }) => {
    const variance = Math.max(0, dot(row, covariance.mmul(Matrix.columnVector([...row])).to1DArray()))
    return { weight, mean: dot(row, mean), levelSd: Math.sqrt(variance), sd: Math.sqrt(variance + scatter * scatter + sampling) }
  })
  if (!parts.every(({ mean, sd }) => Number.isFinite(mean + sd))) throw tooFarApart()
  const level = momentsOfMixture(parts.map(({ weight, mean, levelSd }) => ({ weight, mean, sd: levelSd })))
  return { meanMg: level.mean, levelSd: level.sd, interval: intervalOfMixture(parts) }
}

function momentsOfMixture(parts: readonly Normal[]): { mean: number; sd: number } {
  const mean = parts.reduce((sum, part) => sum + part.weight * part.mean, 0)
  const variance = parts.reduce((sum, part) => sum + part.weight * (part.sd * part.sd + (part.mean - mean) ** 2), 0)
  return { mean, sd: Math.sqrt(variance) }
}

function intervalOfMixture(parts: readonly Normal[]): [number, number] {
  const tail = (1 - CREDIBILITY) / 2
  return [mixtureQuantile(parts, tail), mixtureQuantile(parts, 1 - tail)]
}

/**
 * The quantile of a mixture of normal distributions, by bisection.
 * @param parts weights that add up to one, SDs above zero
 * @param probability between 0 and 1
 * @throws {StatisticsError} `out-of-range`, `not-finite`
 */
export function mixtureQuantile(parts: readonly Normal[], probability: number): number {
  requireShare('probability', probability)
  let low = Math.min(...parts.map(({ mean, sd }) => mean - 40 * sd))
  let high = Math.max(...parts.map(({ mean, sd }) => mean + 40 * sd))
  for (let step = 0; step < 200 && high > low; step++) {
    const middle = (low + high) / 2
    if (middle === low || middle === high) break
    const below = parts.reduce((sum, { weight, mean, sd }) => sum + weight * normalCumulative((middle - mean) / sd), 0)
    if (below < probability) low = middle
    else high = middle
  }
  return (low + high) / 2
}
