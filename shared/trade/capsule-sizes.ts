import { requirePositive } from '#shared/statistics/errors.ts'
import type { TradeSource } from './sources.ts'

/** A range as the sources give it; both ends are equal where they agree. */
export interface Range {
  from: number
  to: number
}

export interface TypicalShell {
  mg: number
  /** Plus or minus, mg, on a single shell or on the mean as the source has it; absent where it gives none. */
  toleranceMg?: number
  source: TradeSource
}

/** One size of hard capsule. Shell weights are orientation only: the shells in use are weighed, a lot at a time. */
export interface CapsuleSize {
  /** As written in the trade; `el` is elongated. */
  size: string
  /** Filling volume of the body, mL. */
  bodyVolumeMl: Range
  closedLengthMm: Range
  typicalShells: readonly TypicalShell[]
  sources: readonly TradeSource[]
}

const VOLUME_SOURCES = ['chart-a', 'chart-b', 'capsule-table', 'study-note'] as const

interface Row {
  size: string
  volume: readonly [number, number]
  length: readonly [number, number]
  a: readonly [mg: number, tolerance: number]
  b?: number
  c?: number
}

const ROWS: readonly Row[] = [
  { size: '000', volume: [1.37, 1.37], length: [25.9, 26.1], a: [158, 10], b: 163 },
  { size: '00el', volume: [1, 1.02], length: [25.3, 25.5], a: [143, 10] },
  { size: '00', volume: [0.9, 0.95], length: [23.4, 23.5], a: [123, 7], b: 123 },
  { size: '0el', volume: [0.78, 0.78], length: [23.2, 23.5], a: [107, 7] },
  { size: '0', volume: [0.68, 0.68], length: [21.4, 21.7], a: [99, 6], b: 96, c: 96 },
  { size: '1', volume: [0.48, 0.5], length: [19.3, 19.4], a: [76, 5], b: 76 },
  { size: '2', volume: [0.36, 0.38], length: [17.6, 18], a: [61, 4], b: 61, c: 63 },
  { size: '3', volume: [0.27, 0.3], length: [15.7, 15.9], a: [48, 3], b: 48, c: 50 },
  { size: '4', volume: [0.2, 0.21], length: [14.3, 14.4], a: [38, 3], b: 38, c: 40 },
  { size: '5', volume: [0.1, 0.13], length: [11.1, 11.4], a: [28, 2], b: 28 },
]

function shellsOf({ a, b, c }: Row): TypicalShell[] {
  const shells: TypicalShell[] = [{ mg: a[0], toleranceMg: a[1], source: 'chart-a' }]
  if (b !== undefined) shells.push({ mg: b, source: 'chart-b' })
  if (c !== undefined) shells.push({ mg: c, toleranceMg: c * 0.05, source: 'chart-c' })
  return shells
}

/** The sizes of hard gelatin capsules, largest first. */
export const CAPSULE_SIZES: readonly CapsuleSize[] = ROWS.map((row) => ({
  size: row.size,
  bodyVolumeMl: { from: row.volume[0], to: row.volume[1] },
  closedLengthMm: { from: row.length[0], to: row.length[1] },
  typicalShells: shellsOf(row),
  sources: VOLUME_SOURCES,
}))

/** The entry of a size, or undefined where the trade has none of that name. */
export function capsuleSize(size: string): CapsuleSize | undefined {
  return CAPSULE_SIZES.find((each) => each.size === size)
}

/**
 * The fill that a size holds at a tapped density: volume × density, at both ends of the volume range.
 * Tamping can exceed the tapped density, and the slug may stand above the body edge and still close.
 * @param size an entry of {@link CAPSULE_SIZES}
 * @param tappedDensityGPerMl above zero
 * @returns mg
 * @throws {StatisticsError} `not-positive`, `not-finite`
 */
export function expectedFillMg({ bodyVolumeMl }: CapsuleSize, tappedDensityGPerMl: number): Range {
  requirePositive('tappedDensityGPerMl', tappedDensityGPerMl)
  return { from: 1000 * bodyVolumeMl.from * tappedDensityGPerMl, to: 1000 * bodyVolumeMl.to * tappedDensityGPerMl }
}
