import { fUpperTail } from './distributions/f.ts'
import { requireFinite, requirePositive, StatisticsError } from './errors.ts'

export interface Measurement {
  part: string
  appraiser: string
  value: number
}

export interface GaugeStudy {
  components: { repeatability: number; reproducibility: number; interaction: number; part: number; total: number }
  /** SDs as a share of the total SD. */
  percentStudy: { repeatability: number; reproducibility: number; gauge: number; part: number }
  /** Six SDs of the gauge as a share of the tolerance. */
  percentTolerance: number | null
  distinctCategories: number
  /** Whether the interaction was small enough to be counted as repeatability. */
  isInteractionPooled: boolean
}

/** An interaction less clear than this is not kept apart (AIAG MSA manual, 4th ed.). */
const POOL_ABOVE = 0.25

interface Table {
  cells: number[][][]
  parts: number
  appraisers: number
  trials: number
}

function arrange(measurements: readonly Measurement[]): Table {
  const parts = [...new Set(measurements.map(({ part }) => part))]
  const appraisers = [...new Set(measurements.map(({ appraiser }) => appraiser))]
  const cells = parts.map((part) =>
    appraisers.map((appraiser) => measurements.filter((one) => one.part === part && one.appraiser === appraiser).map(({ value }) => value)),
  )
  const trials = cells[0]?.[0]?.length ?? 0
  if (parts.length < 2 || appraisers.length < 2 || trials < 2) {
    throw new StatisticsError('too-few-values', 'measurements', 'A study needs at least two parts, two appraisers and two trials of each.')
  }
  if (cells.some((row) => row.some((cell) => cell.length !== trials))) {
    throw new StatisticsError('lengths-differ', 'measurements', 'Every appraiser must measure every part equally often.')
  }
  return { cells, parts: parts.length, appraisers: appraisers.length, trials }
}

const meanOf = (values: readonly number[]): number => values.reduce((sum, value) => sum + value, 0) / values.length

interface MeanSquares {
  part: number
  appraiser: number
  interaction: number
  error: number
  dfInteraction: number
  dfError: number
}

function meanSquares({ cells, parts, appraisers, trials }: Table): MeanSquares {
  const grand = meanOf(cells.flat(2))
  const cellMeans = cells.map((row) => row.map(meanOf))
  const partMeans = cellMeans.map(meanOf)
  const appraiserMeans = Array.from({ length: appraisers }, (_, j) => meanOf(cellMeans.map((row) => row[j]!)))
  const squares = (values: readonly number[]): number => values.reduce((sum, value) => sum + value * value, 0)
  const ssPart = appraisers * trials * squares(partMeans.map((mean) => mean - grand))
  const ssAppraiser = parts * trials * squares(appraiserMeans.map((mean) => mean - grand))
  const ssInteraction =
    trials * squares(cellMeans.flatMap((row, i) => row.map((mean, j) => mean - partMeans[i]! - appraiserMeans[j]! + grand)))
  const ssError = squares(cells.flatMap((row, i) => row.flatMap((cell, j) => cell.map((value) => value - cellMeans[i]![j]!))))
  const dfInteraction = (parts - 1) * (appraisers - 1)
  const dfError = parts * appraisers * (trials - 1)
  return {
    part: ssPart / (parts - 1),
    appraiser: ssAppraiser / (appraisers - 1),
    interaction: ssInteraction / dfInteraction,
    error: ssError / dfError,
    dfInteraction,
    dfError,
  }
}

/**
 * Repeatability and reproducibility of a balance and its users, by the crossed two-way analysis of variance.
 *
 * Formula  mean squares → components (negative ones are 0); an interaction with p above 0.25 is pooled with repeatability;
 *          distinct categories = ⌊√2·part SD/gauge SD⌋.
 * @param measurements each part by each appraiser equally often, at least 2 × 2 × 2
 * @param tolerance width of the tolerance, same unit
 * @throws {StatisticsError} `too-few-values`, `lengths-differ`, `not-finite`, `not-positive`, `no-variation`
 * @see AIAG Measurement Systems Analysis, 4th ed. (2010), ch. III; fixtures/reference/repeatability.json
 */
export function gaugeStudy(measurements: readonly Measurement[], tolerance?: number): GaugeStudy {
  for (const [place, { value }] of measurements.entries()) requireFinite(`measurements[${place}].value`, value)
  if (tolerance !== undefined) requirePositive('tolerance', tolerance)
  const table = arrange(measurements)
  const ms = meanSquares(table)
  const isInteractionPooled = ms.error > 0 ? fUpperTail(ms.interaction / ms.error, ms.dfInteraction, ms.dfError) > POOL_ABOVE : false
  const pooled = (ms.interaction * ms.dfInteraction + ms.error * ms.dfError) / (ms.dfInteraction + ms.dfError)
  const { parts, appraisers, trials } = table
  const repeatability = isInteractionPooled ? pooled : ms.error
  const interaction = isInteractionPooled ? 0 : Math.max(0, (ms.interaction - ms.error) / trials)
  const against = isInteractionPooled ? pooled : ms.interaction
  const reproducibility = Math.max(0, (ms.appraiser - against) / (parts * trials))
  const part = Math.max(0, (ms.part - against) / (appraisers * trials))
  const gauge = repeatability + reproducibility + interaction
  const total = gauge + part
  if (!(total > 0)) throw new StatisticsError('no-variation', 'measurements', 'All measurements are equal.')
  const percent = (variance: number): number => 100 * Math.sqrt(variance / total)
  return {
    components: { repeatability, reproducibility, interaction, part, total },
    percentStudy: {
      repeatability: percent(repeatability),
      reproducibility: percent(reproducibility),
      gauge: percent(gauge),
      part: percent(part),
    },
    percentTolerance: tolerance === undefined ? null : (100 * 6 * Math.sqrt(gauge)) / tolerance,
    distinctCategories: gauge > 0 ? Math.floor(Math.SQRT2 * Math.sqrt(part / gauge)) : 0,
    isInteractionPooled,
  }
}
