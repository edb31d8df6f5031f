import { requireFinite, requirePositive, StatisticsError } from '#shared/statistics/errors.ts'
import type { TradeSource } from './sources.ts'

/** One sixth of the disc is one index; five stations tamp, the sixth pushes the slugs into the bodies. */
export const TAMPING_STATIONS = [1, 2, 3, 4, 5] as const
export const DISC_GROUPS = 6

export const LEVERS = [
  'penetration-1',
  'penetration-2',
  'penetration-3',
  'penetration-4',
  'penetration-5',
  'penetration-all',
  'bed-height',
  'speed',
  'disc-thickness',
  'spring',
] as const
export type LeverId = (typeof LEVERS)[number]

/** What a setting does and how far one move may go. */
export interface Lever {
  id: LeverId
  name: string
  unit: 'mm' | 'indexes/min' | 'N'
  /** The largest single move, in `unit`; absent where no published or usual limit is known, so that none is assumed. */
  maxMove?: { coarse: number; fine: number }
  /** The smallest step that the scale shows, in `unit`. */
  resolution: number
  effectOnMean: string
  effectOnSpread: string
  source: TradeSource
}

const station = (number: (typeof TAMPING_STATIONS)[number]): Lever => ({
  id: `penetration-${number}`,
  name: `Penetration depth, station ${number}`,
  unit: 'mm',
  maxMove: { coarse: 1, fine: 0.5 },
  resolution: 0.1,
  effectOnMean: 'Main fine lever: deeper is heavier, on a scale whose direction is recorded for the machine.',
  effectOnSpread: 'Uneven steps between stations raise it.',
  source: 'common-practice',
})

/** Every lever of the weight, with its step limits. */
export const LEVER_TABLE: readonly Lever[] = [
  ...TAMPING_STATIONS.map(station),
  {
    id: 'penetration-all',
    name: 'Penetration depth, all stations alike',
    unit: 'mm',
    maxMove: { coarse: 0.2, fine: 0.2 },
    resolution: 0.1,
    effectOnMean: 'Five times the effect of one station.',
    effectOnSpread: 'None expected while the steps between stations stay as they are.',
    source: 'common-practice',
  },
  {
    id: 'bed-height',
    name: 'Powder-bed height',
    unit: 'mm',
    resolution: 1,
    effectOnMean: 'More for cohesive powder.',
    effectOnSpread: 'Too low: starved bores. Too high: packing, dragging pins.',
    source: 'bench-filler',
  },
  {
    id: 'speed',
    name: 'Machine speed',
    unit: 'indexes/min',
    resolution: 1,
    effectOnMean: 'Usually lighter with speed; approve the weight at the speed of the run.',
    effectOnSpread: 'Usually up with speed.',
    source: 'common-practice',
  },
  {
    id: 'disc-thickness',
    name: 'Dosing-disc thickness',
    unit: 'mm',
    resolution: 0.5,
    effectOnMean: 'Strong and near proportional; set once for a product, never during a run.',
    effectOnSpread: 'A wrong disc drives the stations to the ends of their scales, and the spread up.',
    source: 'tablets-capsules-tamping',
  },
  {
    id: 'spring',
    name: 'Tamping spring',
    unit: 'N',
    resolution: 1,
    effectOnMean: 'Little: it serves the strength of the slug.',
    effectOnSpread: 'Too soft: loose slugs, losses in transfer.',
    source: 'instrumentation-2008',
  },
]

/** The entry of a lever. */
export function leverById(id: LeverId): Lever {
  const found = LEVER_TABLE.find((lever) => lever.id === id)
  if (!found) throw new StatisticsError('unknown-option', 'lever', `There is no lever ${id}.`)
  return found
}

/** The order of tuning after a change of tooling; mean and spread percentages are of the target. */
export const TUNING_ORDER = [
  'Disc correct and flat, clearance to the ring set.',
  'All stations at the last good profile of the product.',
  'Bed height stable; the mean does not matter yet.',
  'Run two to three minutes at low speed and discard.',
  'Coarse: bring the mean inside ±5 % with stations 1 and 2.',
  'Fine: stations 3 to 5, to ±1 %.',
  'Check slug, dust and closing.',
  'Go to production speed and check again.',
  'Check through one hopper refill.',
  'First-off approval.',
] as const

/** When coarse tuning ends and when tuning is done, percent of target. */
export const TUNING_BANDS = { coarsePercent: 5, donePercent: 1 } as const

/** Trials after which the fitter or engineer is asked (common practice). */
export const TRIALS_BEFORE_HELP = 6

/** The share of the geometric ceiling that a station really gains (from memory of the trade: 30 to 100 %). */
export const GAIN_SHARE = { from: 0.3, to: 1 } as const

/**
 * The most that one station can add for a millimetre of depth: dW = A·ρ·dp, with A the area of the bore.
 * 1 mm² × 1 mm × 1 g/mL is 1 mg.
 * @param bore diameter in mm and bulk density of the powder in g/mL, both above zero
 * @returns mg per mm
 * @throws {StatisticsError} `not-positive`, `not-finite`
 */
export function weightResponseCeiling({
  boreDiameterMm,
  bulkDensityGPerMl,
}: {
  boreDiameterMm: number
  bulkDensityGPerMl: number
}): number {
  requirePositive('boreDiameterMm', boreDiameterMm)
  requirePositive('bulkDensityGPerMl', bulkDensityGPerMl)
  return Math.PI * (boreDiameterMm / 2) ** 2 * bulkDensityGPerMl
}

/**
 * Carr index = 100·(1 − bulk/tapped), percent.
 * @throws {StatisticsError} `not-positive`, `not-finite`, `limits-crossed` where bulk is above tapped
 */
export function carrIndexPercent(bulkDensity: number, tappedDensity: number): number {
  requireDensities(bulkDensity, tappedDensity)
  return 100 * (1 - bulkDensity / tappedDensity)
}

/**
 * Hausner ratio = tapped/bulk; so Carr = 100·(1 − 1/H).
 * @throws {StatisticsError} `not-positive`, `not-finite`, `limits-crossed` where bulk is above tapped
 */
export function hausnerRatio(bulkDensity: number, tappedDensity: number): number {
  requireDensities(bulkDensity, tappedDensity)
  return tappedDensity / bulkDensity
}

function requireDensities(bulkDensity: number, tappedDensity: number): void {
  requirePositive('bulkDensity', bulkDensity)
  requirePositive('tappedDensity', tappedDensity)
  if (bulkDensity > tappedDensity) {
    throw new StatisticsError('limits-crossed', 'bulkDensity', 'The bulk density cannot be above the tapped density.')
  }
}

/** The flow scale: upper ends of the Carr index, percent; see the source `flow-scale`. */
export const FLOW_SCALE = [
  { upToPercent: 10, word: 'excellent' },
  { upToPercent: 15, word: 'good' },
  { upToPercent: 20, word: 'fair' },
  { upToPercent: 25, word: 'passable' },
  { upToPercent: 31, word: 'poor' },
  { upToPercent: 37, word: 'very poor' },
  { upToPercent: 100, word: 'very, very poor' },
] as const
export type FlowWord = (typeof FLOW_SCALE)[number]['word']

/**
 * The word of the flow scale for a Carr index, which the scale gives in whole percent.
 * Tamp filling wants some compressibility, about 18 to 30 % (from memory): excellent flow is not best here.
 * @throws {StatisticsError} `not-finite`, `out-of-range` outside 0 to 100
 */
export function flowWord(carrPercent: number): FlowWord {
  requireFinite('carrPercent', carrPercent)
  const whole = Math.round(carrPercent)
  const found = FLOW_SCALE.find(({ upToPercent }) => whole <= upToPercent)
  if (!found || carrPercent < 0)
    throw new StatisticsError('out-of-range', 'carrPercent', `A Carr index lies from 0 to 100, but is ${carrPercent}.`)
  return found.word
}
