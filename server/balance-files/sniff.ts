import { UnreadableError } from './problems.ts'
import { blockRecords, type LineBlock } from './records.ts'
import { namesWeight } from './role-names.ts'
import { readShownWeight, readUnit } from './weight.ts'

export type Delimiter = ',' | ';' | '\t' | '|'
export interface FileRecord {
  line: number
  cells: string[]
}

/** In the order of trust: a comma may be a decimal sign, a tab never is. */
const DELIMITERS: readonly Delimiter[] = ['\t', ';', '|', ',']
const MAX_PREAMBLE = 100
const COMMA_NUMBER = /^[+-]?\d+,\d+(?:\s*m?g)?$/i
const POINT_NUMBER = /^[+-]?\d+\.\d+(?:\s*m?g)?$/i

export interface FileForm {
  delimiter: Delimiter
  decimal: '.' | ','
  records: FileRecord[]
  /** Places in `records`. */
  header: number | null
  firstData: number
}

/** Guesses how the first lines of a file read. A guess: a person confirms it before anything is taken (requirement A22). */
export function sniffForm(blocks: readonly LineBlock[]): FileForm | undefined {
  const delimiter = sniffDelimiter(blocks)
  const records = recordsOf(blocks, delimiter)
  const decimal = sniffDecimal(records, delimiter)
  const firstData = findFirstData(records, decimal)
  if (firstData < 0) return undefined
  return { delimiter, decimal, records, firstData, header: findHeader(records, firstData) }
}

function recordsOf(blocks: readonly LineBlock[], delimiter: Delimiter): FileRecord[] {
  return blocks.flatMap((block) => [...blockRecords(block, delimiter)]).filter(({ cells }) => cells.some((cell) => cell.trim() !== ''))
}

/** The first delimiter, in the order of trust, by which half of the lines have one width; else the best of them. */
function sniffDelimiter(blocks: readonly LineBlock[]): Delimiter {
  const shares = DELIMITERS.map((delimiter) => ({ delimiter, share: delimiterShare(blocks, delimiter) }))
  const best = shares.find(({ share }) => share >= 0.5) ?? shares.sort((a, b) => b.share - a.share)[0]
  return best && best.share > 0 ? best.delimiter : ';'
}

function delimiterShare(blocks: readonly LineBlock[], delimiter: Delimiter): number {
  try {
    const records = recordsOf(blocks, delimiter)
    return delimiter === ',' && isDecimalList(records) ? 0 : modalShare(records.map(({ cells }) => cells.length))
  } catch (error) {
    // Under a wrong delimiter quotes stand in wrong places; under the right one the final reading reports them.
    if (error instanceof UnreadableError) return 0
    throw error
  }
}

/** The share of lines that have the most common number of cells, if that is more than one. */
function modalShare(widths: readonly number[]): number {
  const counts = new Map<number, number>()
  for (const width of widths) counts.set(width, (counts.get(width) ?? 0) + 1)
  const [mode = 1, count = 0] = [...counts].sort((a, b) => b[1] - a[1] || b[0] - a[0])[0] ?? []
  return mode > 1 ? count / widths.length : 0
}

/** "496,1" in each line is a list of weights with a decimal comma, unless the first parts simply count up. */
function isDecimalList(records: readonly FileRecord[]): boolean {
  const numeric = records.filter(({ cells }) => cells.length === 2 && cells.every((cell) => /^\s*\d+\s*(?:m?g)?$/i.test(cell)))
  if (numeric.length < records.length * 0.6) return false
  if (records.some(({ cells }) => cells.length > 1 && cells.every((cell) => /\p{L}{2}/u.test(cell)))) return false
  return !numeric.every(({ cells }, place) => Number(cells[0]) === Number(numeric[0]?.cells[0]) + place)
}

function sniffDecimal(records: readonly FileRecord[], delimiter: Delimiter): '.' | ',' {
  const cells = records.flatMap((record) => record.cells.map((cell) => cell.trim()))
  const commas = cells.filter((cell) => COMMA_NUMBER.test(cell)).length
  const points = cells.filter((cell) => POINT_NUMBER.test(cell)).length
  return commas > points && delimiter !== ',' ? ',' : '.'
}

/** Whether a cell can be a weight as shown. */
export function isWeightCell(cell: string, decimal: '.' | ','): boolean {
  return !('code' in readShownWeight(cell.trim(), decimal))
}

function findFirstData(records: readonly FileRecord[], decimal: '.' | ','): number {
  const isData = (record: FileRecord | undefined): boolean => record?.cells.some((cell) => isWeightCell(cell, decimal)) ?? false
  const named = records.findIndex((record) => !isData(record) && record.cells.some((cell) => namesWeight(cell)))
  if (named >= 0 && named <= MAX_PREAMBLE) {
    const next = isUnitsLine(records[named + 1]) ? named + 2 : named + 1
    if (next < records.length && (records[next]?.cells.length ?? 0) > 0 && widthsAgree(records[named], records[next])) return next
  }
  return records.findIndex((record, place) => {
    const following = records.slice(place + 1, place + 3)
    return isData(record) && (following.length === 0 || following.some(isData))
  })
}

/** The nearest line above the data that names columns; a line of units between is passed over. */
function findHeader(records: readonly FileRecord[], firstData: number): number | null {
  const place = isUnitsLine(records[firstData - 1]) ? firstData - 2 : firstData - 1
  const record = records[place]
  const hasNames = record?.cells.some((cell) => /\p{L}/u.test(cell)) ?? false
  return hasNames && widthsAgree(record, records[firstData]) ? place : null
}

function isUnitsLine(record: FileRecord | undefined): boolean {
  return record?.cells.every((cell) => cell.trim() === '' || readUnit(cell.replace(/[[\]()]/g, '')) !== undefined) ?? false
}

function widthsAgree(one: FileRecord | undefined, other: FileRecord | undefined): boolean {
  return Math.abs((one?.cells.length ?? 0) - (other?.cells.length ?? 0)) <= 1
}
