import type { SlopePrior } from '#shared/statistics/tuning.ts'
import { GAIN_SHARE, LEVER_TABLE, weightResponseCeiling, type Lever } from './tamping.ts'

/** What the site knows of one setting on one machine. */
export interface LeverOptions {
  /** −1 where a larger reading is lighter; scales differ between machines. */
  direction?: 1 | -1 | undefined
  /** Ends of the scale. */
  min?: number | undefined
  max?: number | undefined
  /** The largest single move. */
  maxMove?: number | undefined
}

export interface Geometry {
  boreDiameterMm: number
  bulkDensityGPerMl: number
}

/** The patterns by which a setting of any name is known as a lever. */
const NAMES: readonly (readonly [RegExp, (found: RegExpMatchArray) => string])[] = [
  [/(?:penetration|station|depth|pin)\D*([1-5])/i, ([, station]) => `penetration-${station}`],
  [/(?:penetration|station|depth).*all|all.*(?:penetration|station|depth)/i, () => 'penetration-all'],
  [/bed/i, () => 'bed-height'],
  [/speed|indexes/i, () => 'speed'],
  [/disc/i, () => 'disc-thickness'],
  [/spring/i, () => 'spring'],
]

/** The lever that a setting names, or undefined for a setting that the trade table does not know. */
export function leverNamed(setting: string): Lever | undefined {
  for (const [pattern, idOf] of NAMES) {
    const found = setting.match(pattern)
    if (found) return LEVER_TABLE.find(({ id }) => id === idOf(found))
  }
  return undefined
}

/** Without geometry: 0.5 mm at one station moves the mean by 0.7 to 2.2 % (derived; size 0, 400 mg), so 1.4 to 4.4 % a mm. */
const STATION_PERCENT_PER_MM = { middle: 2.9, sd: 1.5 }
/** Weak beliefs about levers whose effect differs from powder to powder: no effect, give or take so many percent a unit. */
const UNKNOWN_PERCENT_PER_UNIT = { 'bed-height': 2, speed: 0.2, spring: 0.1, other: 5 }
/** Disc thickness is near proportional; how near is a belief. */
const DISC_DOUBT = 0.3

/**
 * A weak prior for the slope of a setting, mg per unit.
 *
 * Formula  one station: the ceiling A·ρ times the middle of the share that is really gained (30 to 100 %), its SD half that
 *          range; all stations: five times that. Disc thickness: proportional, target/thickness. Others: zero with a wide SD.
 * @param setting its name
 * @param facts target in mg, the present reading, geometry and options where known
 * @throws {StatisticsError} `not-positive`, `not-finite` for a geometry that cannot be
 * @see trade notes behind docs/calculations/tuning.md
 */
export function usualPrior(
  setting: string,
  {
    target,
    reading,
    geometry,
    options,
  }: { target: number; reading: number; geometry?: Geometry | undefined; options?: LeverOptions | undefined },
): SlopePrior {
  const id = leverNamed(setting)?.id
  const direction = options?.direction ?? 1
  if (id?.startsWith('penetration')) {
    const station = stationPrior(target, geometry)
    const stations = id === 'penetration-all' ? 5 : 1
    return { mgPerUnit: direction * stations * station.mgPerUnit, sd: stations * station.sd }
  }
  if (id === 'disc-thickness' && reading > 0) return { mgPerUnit: target / reading, sd: (DISC_DOUBT * target) / reading }
  const percent = id === 'bed-height' || id === 'speed' || id === 'spring' ? UNKNOWN_PERCENT_PER_UNIT[id] : UNKNOWN_PERCENT_PER_UNIT.other
  return { mgPerUnit: 0, sd: (percent / 100) * target }
}

function stationPrior(target: number, geometry: Geometry | undefined): SlopePrior {
  if (!geometry) return { mgPerUnit: (STATION_PERCENT_PER_MM.middle / 100) * target, sd: (STATION_PERCENT_PER_MM.sd / 100) * target }
  const ceiling = weightResponseCeiling(geometry)
  return { mgPerUnit: (ceiling * (GAIN_SHARE.from + GAIN_SHARE.to)) / 2, sd: (ceiling * (GAIN_SHARE.to - GAIN_SHARE.from)) / 2 }
}
