import { requirePositive, StatisticsError } from '#shared/statistics/errors.ts'
import { fitTuning, type Slope, type SlopePrior, type Trial, type TuningModel } from '#shared/statistics/tuning.ts'
import { TUNING_BANDS } from './tamping.ts'
import { cautionsOn } from './tuning-cautions.ts'
import { leverNamed, usualPrior, type Geometry, type LeverOptions } from './tuning-levers.ts'

export interface TuningRequest {
  /** Trials in their order; the last is where the machine stands now. */
  history: readonly Trial[]
  /** Target fill weight, mg. */
  target: number
  /** The one setting to be moved; chosen by the tuning order unless stated. */
  lever?: string | undefined
  priors?: Readonly<Record<string, SlopePrior>> | undefined
  geometry?: Geometry | undefined
  levers?: Readonly<Record<string, LeverOptions>> | undefined
  /** RSD above which the spread, not the mean, is the problem; 4 % unless the product says otherwise. */
  rsdLimitPercent?: number | undefined
}

export interface Recommendation {
  lever: string
  from: number
  /** Equal to `from` where the advice is to leave it. */
  to: number
  predictedMeanMg: number
  /** 95 % prediction interval of the mean of the next sample of the same size. */
  interval: [number, number]
}

export interface TuningAdvice {
  /** Learned weight response of each setting, mg per unit. */
  slopes: Record<string, Slope>
  recommendation: Recommendation
  cautions: string[]
}

export interface Situation {
  request: TuningRequest
  model: TuningModel
  last: Trial
  /** Estimated level minus target, mg. */
  deviationMg: number
  isCoarse: boolean
  /** Within ±1 %, or within what the sampling alone explains. */
  isSettled: boolean
}

/** A move before and after its limits were put on it. */
export interface Move {
  lever: string
  from: number
  to: number
  /** What would bring the mean to the target; not finite where the effect is unknown. */
  wanted: number
  isKnown: boolean
  isCut: boolean
  atEndOfScale: boolean
}

const USUAL_RSD_LIMIT_PERCENT = 4
/** A slope is known well enough to act on where it is this many SDs from zero. */
const KNOWN_FROM_SDS = 1

/**
 * Advises one move of one lever that brings the mean fill weight towards the target, or to leave it as it is.
 *
 * Method  level and slopes by {@link fitTuning}; move = −deviation/slope, cut to the step limits and the scale, rounded to what
 *         the scale shows. Beyond 5 % of the target stations 1 and 2 are preferred, closer in stations 3 to 5; among those the
 *         lever with the least expected squared deviation afterwards.
 * @throws {StatisticsError} as {@link fitTuning}; `unknown-option` where `lever` occurs in no trial, `too-few-values` without any setting
 * @see docs/calculations/tuning.md
 */
export function adviseTuning(request: TuningRequest): TuningAdvice {
  const { history, target, lever, priors = {} } = request
  if (request.rsdLimitPercent !== undefined) requirePositive('rsdLimitPercent', request.rsdLimitPercent)
  const filledPriors = priorsFor(request, priors)
  if (lever !== undefined && !Object.hasOwn(filledPriors, lever)) {
    throw new StatisticsError('unknown-option', 'lever', `The setting ${lever} occurs in no trial.`)
  }
  if (Object.keys(filledPriors).length === 0) throw new StatisticsError('too-few-values', 'history', 'No trial names a setting.')
  const model = fitTuning(history, filledPriors, target)
  const situation = situationOf(request, model)
  const move = situation.isSettled ? stay(situation) : bestMove(situation)
  const { meanMg, interval } = model.predict({ [move.lever]: move.to }, situation.last)
  const forecast = history.length > 1 ? fitTuning(history.slice(0, -1), filledPriors, target) : undefined
  const cautions = cautionsOn(situation, move, request.rsdLimitPercent ?? USUAL_RSD_LIMIT_PERCENT, forecast)
  return {
    slopes: model.slopes,
    recommendation: { lever: move.lever, from: move.from, to: move.to, predictedMeanMg: meanMg, interval },
    cautions,
  }
}

function priorsFor(
  { history, target, geometry, levers = {} }: TuningRequest,
  given: Readonly<Record<string, SlopePrior>>,
): Record<string, SlopePrior> {
  requirePositive('target', target)
  const readings = history.reduce<Record<string, number>>((known, { settings }) => ({ ...known, ...settings }), {})
  return Object.fromEntries(
    Object.entries(readings).map(([setting, reading]) => [
      setting,
      given[setting] ?? usualPrior(setting, { target, reading, geometry, options: levers[setting] }),
    ]),
  )
}

function situationOf(request: TuningRequest, model: TuningModel): Situation {
  const { history, target } = request
  const last = history.at(-1)!
  const deviationMg = model.predict({}, last).meanMg - target
  const percent = (100 * Math.abs(deviationMg)) / target
  const seenMg = Math.abs(last.meanMg - target)
  const isNoise = seenMg <= (2 * last.sdMg) / Math.sqrt(last.n)
  const isDone = percent <= TUNING_BANDS.donePercent && (100 * seenMg) / target <= TUNING_BANDS.donePercent
  return { request, model, last, deviationMg, isCoarse: percent > TUNING_BANDS.coarsePercent, isSettled: isDone || isNoise }
}

/** The levers in the order in which the tuning order would reach for them; those it would not are left out. */
function candidates({ request, model, isCoarse }: Situation): string[] {
  if (request.lever !== undefined) return [request.lever]
  const settings = Object.keys(model.current).filter((setting) => stepLimit(request, setting, isCoarse) !== undefined)
  const preferred = isCoarse ? /^penetration-[12]$/ : /^penetration-[345]$/
  const first = settings.filter((setting) => preferred.test(leverNamed(setting)?.id ?? ''))
  return first.length > 0 ? first : settings
}

/** The largest single move of a setting, or undefined where none is known and the setting is left alone. */
function stepLimit({ history, levers = {} }: TuningRequest, setting: string, isCoarse: boolean): number | undefined {
  const own = levers[setting]?.maxMove
  if (own !== undefined) return own
  const lever = leverNamed(setting)
  if (lever) return lever.maxMove?.[isCoarse ? 'coarse' : 'fine']
  // A setting of unknown kind may go as far at once as it has gone before.
  const readings = history.flatMap(({ settings }) => settings[setting] ?? [])
  const reach = Math.max(...readings) - Math.min(...readings)
  return reach > 0 ? reach : undefined
}

function stay(situation: Situation): Move {
  const lever = candidates(situation)[0] ?? Object.keys(situation.model.current)[0]!
  return { ...planMove(situation, lever), to: situation.model.current[lever]!, isCut: false, atEndOfScale: false }
}

function bestMove(situation: Situation): Move {
  const { model, last, request } = situation
  const moves = candidates(situation).map((lever) => planMove(situation, lever))
  const scored = moves.map((move) => {
    const { meanMg, levelSd } = model.predict({ [move.lever]: move.to }, last)
    return { move, score: (meanMg - request.target) ** 2 + levelSd ** 2 }
  })
  const known = scored.filter(({ move }) => move.isKnown)
  const pool = known.length > 0 ? known : scored
  return pool.length === 0 ? stay(situation) : pool.reduce((best, each) => (each.score < best.score ? each : best)).move
}

function planMove({ model, request, deviationMg, isCoarse }: Situation, lever: string): Move {
  const from = model.current[lever]!
  const { mgPerUnit, sd } = model.slopes[lever]!
  const limit = stepLimit(request, lever, isCoarse)
  const wanted = -deviationMg / mgPerUnit
  const isKnown = Math.abs(mgPerUnit) >= KNOWN_FROM_SDS * sd && limit !== undefined
  if (!isKnown) return { lever, from, to: from, wanted, isKnown, isCut: false, atEndOfScale: false }
  const { min = -Infinity, max = Infinity } = request.levers?.[lever] ?? {}
  const step = toResolution(Math.min(limit, Math.abs(wanted)), leverNamed(lever)?.resolution ?? 0) * Math.sign(wanted)
  const to = Number(Math.min(max, Math.max(min, from + step)).toFixed(6))
  return { lever, from, to, wanted, isKnown, isCut: Math.abs(wanted) > limit + 1e-9, atEndOfScale: to === min || to === max }
}

/** The nearest step that the scale shows; a limit is itself a whole number of steps. */
function toResolution(size: number, resolution: number): number {
  return resolution === 0 ? size : Math.round(size / resolution) * resolution
}
