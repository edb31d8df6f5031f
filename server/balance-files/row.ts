import type { BalanceFileMapping, BalanceFileRole } from '#shared/schemas/balance-files.ts'
import type { Layout } from './columns.ts'
import type { Findings, ProblemPlace } from './problems.ts'
import { TimeColumn } from './time.ts'
import { checkWeight, readShownWeight, readUnit, shownDecimalsMg, toMilligrams, type WeightMark, type WeightUnit } from './weight.ts'

/** One capsule of a file. */
export interface WeighingRow {
  /** Line in the file, counted from 1. */
  line: number
  /** Which sample of the file, counted from 0, and what the file calls it. */
  sampleIndex: number
  sample: string | null
  weightMg: number
  /** The digits as the balance showed them, in `unit`: 96.10 stays 96.10. */
  shown: string
  unit: WeightUnit
  /** Decimals of a milligram that the digits show. */
  decimalsMg: number
  mark: WeightMark | null
  position: number | null
  segment: number | null
  weighedAt: Date | null
  status: string | null
}

export interface RowLimits {
  now: Date
  /** Positions of a segment and segments of the machine, where they are known. */
  positions?: number | undefined
  segments?: number | undefined
  /** Smallest step of the balance in mg; more decimals than it can show are refused. */
  readabilityMg?: number | undefined
}

const MAX_NUMBER = 255

/** Turns the cells of one record into a weighing, or says what is wrong with each cell. */
export class RowReader {
  private readonly time: TimeColumn
  private readonly stable: ReadonlySet<string>

  constructor(
    private readonly mapping: BalanceFileMapping,
    private readonly layout: Layout,
    private readonly limits: RowLimits,
    private readonly findings: Findings,
  ) {
    this.time = new TimeColumn(mapping.timeFormat, mapping.timeZone, limits.now)
    this.stable = new Set(mapping.stableWords.map((word) => word.toLowerCase()))
  }

  read(cells: readonly string[], line: number): WeighingRow | undefined {
    const before = this.findings.problemTotal
    const status = this.status(cells, line)
    const weight = this.weight(cells, line)
    const sample = this.cell(cells, 'sample') ?? null
    if (sample === '') this.problem('sample', { code: 'no-sample', line, found: '', expected: 'the sample that this capsule belongs to' })
    const position = this.whole(cells, line, 'position', this.limits.positions)
    const segment = this.whole(cells, line, 'segment', this.limits.segments)
    const weighedAt = this.weighedAt(cells, line)
    if (!weight || this.findings.problemTotal > before) return undefined
    const { weightMg, shown, unit, decimalsMg, mark } = weight
    // Written out, because a million spread objects take four times as long as these.
    return { line, sampleIndex: 0, sample, weightMg, shown, unit, decimalsMg, mark, position, segment, weighedAt, status }
  }

  private cell(cells: readonly string[], role: BalanceFileRole): string | undefined {
    const place = this.layout.places[role]
    return place === undefined ? undefined : (cells[place] ?? '').trim()
  }

  private problem(role: BalanceFileRole, place: Omit<ProblemPlace, 'column'>): void {
    const at = this.layout.places[role] ?? 0
    this.findings.problem({ ...place, column: this.layout.names[at] ?? `column ${at + 1}` })
  }

  private status(cells: readonly string[], line: number): string | null {
    const found = this.cell(cells, 'status')
    if (found === undefined) return null
    if (!this.stable.has(found.toLowerCase())) {
      const expected = `a stable reading (${this.mapping.stableWords.map((word) => word || 'an empty cell').join(', ')})`
      this.problem('status', { code: 'unstable-reading', line, found, expected })
    }
    return found
  }

  private weight(
    cells: readonly string[],
    line: number,
  ): Pick<WeighingRow, 'weightMg' | 'shown' | 'unit' | 'decimalsMg' | 'mark'> | undefined {
    const found = this.cell(cells, 'weight') ?? ''
    const reading = readShownWeight(found, this.mapping.decimal)
    if ('code' in reading) {
      this.problem('weight', { ...reading, line, found })
      return undefined
    }
    if (reading.word !== null && !this.stable.has(reading.word)) {
      this.problem('weight', { code: 'unstable-reading', line, found, expected: 'a number without a word before it' })
      return undefined
    }
    const unit = this.unit(cells, line, { found, own: reading.unit })
    if (unit === undefined) return undefined
    const weightMg = toMilligrams(reading.shown, unit)
    const decimalsMg = shownDecimalsMg(reading.shown, unit)
    const problem = checkWeight({ weightMg, decimalsMg, isNegative: reading.isNegative }, this.limits.readabilityMg)
    if (problem) this.problem('weight', { ...problem, line, found })
    return problem ? undefined : { weightMg, shown: reading.shown, unit, decimalsMg, mark: reading.mark }
  }

  /** The unit of one weight: what its own cell, its unit cell and the header say must agree; nothing said is refused. */
  private unit(cells: readonly string[], line: number, weight: { found: string; own: WeightUnit | null }): WeightUnit | undefined {
    const unitCell = this.cell(cells, 'unit')
    const listed = unitCell === undefined ? undefined : readUnit(unitCell)
    if (unitCell !== undefined && listed === undefined && (unitCell !== '' || weight.own === null)) {
      this.problem('unit', { code: 'unknown-unit', line, found: unitCell, expected: 'the unit g or mg' })
      return undefined
    }
    const { headerUnit, defaultUnit } = this.layout
    const unit = weight.own ?? listed ?? headerUnit ?? (unitCell === undefined ? defaultUnit : null) ?? undefined
    const other = [listed, headerUnit].find((said) => said !== undefined && said !== null && said !== unit)
    if (other) {
      this.problem('weight', { code: 'unit-conflict', line, found: weight.found, expected: `one unit, not ${unit} and ${other} at once` })
      return undefined
    }
    if (unit === undefined)
      this.problem('weight', { code: 'unknown-unit', line, found: weight.found, expected: 'a unit (g or mg), which is never assumed' })
    return unit
  }

  private whole(cells: readonly string[], line: number, role: 'position' | 'segment', limit = MAX_NUMBER): number | null {
    const found = this.cell(cells, role)
    if (found === undefined) return null
    const value = /^\d{1,6}$/.test(found) ? Number(found) : 0
    if (value < 1 || value > limit) {
      this.problem(role, { code: `unknown-${role}`, line, found, expected: `a ${role} from 1 to ${limit}` })
    }
    return value
  }

  private weighedAt(cells: readonly string[], line: number): Date | null {
    const time = this.cell(cells, 'time')
    if (time === undefined) return null
    const date = this.cell(cells, 'date')
    const found = date === undefined ? time : `${date} ${time}`
    const reading = this.time.read(found)
    if (!reading.ok) {
      this.problem('time', { code: reading.code, line, found, expected: reading.expected })
      return null
    }
    if (reading.isRepeatedHour)
      this.findings.note(line, 'This hour came twice when the clocks went back; the order of the lines decided which one it is.')
    return new Date(reading.atMs)
  }
}
