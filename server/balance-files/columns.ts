import type { BalanceFileColumn, BalanceFileMapping, BalanceFileRole } from '#shared/schemas/balance-files.ts'
import { readUnit, type WeightUnit } from './weight.ts'
import { UnreadableError, WHOLE_FILE, type Findings } from './problems.ts'

const HEADER_UNIT = /[[(/_\s](mg|g|kg|µg|ug|ct|oz|gr)[\])]?\s*$/i

/** Where each thing stands in a row, counted from 0, and how messages call the columns. */
export interface Layout {
  width: number
  places: Readonly<Partial<Record<BalanceFileRole, number>>>
  names: readonly string[]
  /** The unit that the header states for the weights, and the one that was set for weights that name none. */
  headerUnit: WeightUnit | null
  defaultUnit: WeightUnit | null
}

/** The unit that a column's name ends with, such as "Weight [g]"; undefined where it names none. */
export function headerUnit(name: string): string | undefined {
  return HEADER_UNIT.exec(name)?.[1]?.toLowerCase()
}

/** Two columns of one name cannot be told apart; each but the first is a problem. */
export function refuseDuplicates(header: readonly string[], line: number, findings: Findings): void {
  const seen = new Set<string>()
  for (const name of header) {
    const key = name.trim().toLowerCase()
    if (key !== '' && seen.has(key)) {
      findings.problem({ code: 'duplicate-header', line, column: name.trim(), found: name.trim(), expected: 'each column name once' })
    }
    seen.add(key)
  }
}

/** Finds the columns of a mapping in a header line, or by place where there is none. */
export function layoutOf(mapping: BalanceFileMapping, header: readonly string[] | null, width: number): Layout {
  const line = mapping.headerRow ?? 1
  const names = Array.from({ length: width }, (_, place) => header?.[place]?.trim() || `column ${place + 1}`)
  const places: Partial<Record<BalanceFileRole, number>> = {}
  for (const role of ROLE_ORDER) {
    const column = mapping.columns[role]
    if (column !== undefined) places[role] = placeOf(column, { role, names, header, line })
  }
  return { width, places, names, headerUnit: statedUnit(mapping, names, places.weight, line), defaultUnit: mapping.unit }
}

const ROLE_ORDER: readonly BalanceFileRole[] = ['weight', 'unit', 'position', 'segment', 'sample', 'time', 'date', 'status']

interface ColumnSearch {
  role: BalanceFileRole
  names: readonly string[]
  header: readonly string[] | null
  line: number
}

function placeOf(column: BalanceFileColumn, { role, names, header, line }: ColumnSearch): number {
  const place =
    typeof column === 'number' ? column - 1 : (header ?? []).findIndex((name) => name.trim().toLowerCase() === column.trim().toLowerCase())
  if (place >= 0 && place < names.length) return place
  const wanted = typeof column === 'number' ? `column ${column}` : column
  const expected = `the ${role} in ${typeof column === 'number' ? wanted : `a column called ${wanted}`}`
  throw new UnreadableError({ code: 'unknown-column', line, column: wanted, found: names.join(', '), expected })
}

function statedUnit(mapping: BalanceFileMapping, names: readonly string[], weight: number | undefined, line: number): WeightUnit | null {
  const name = names[weight ?? 0] ?? ''
  const named = mapping.headerRow === null ? undefined : headerUnit(name)
  if (named === undefined) return null
  const unit = readUnit(named)
  if (unit === undefined)
    throw new UnreadableError({ code: 'unknown-unit', line, column: name, found: named, expected: 'the unit g or mg' })
  if (mapping.unit !== null && mapping.unit !== unit) {
    const expected = `the unit ${mapping.unit} that was set for this balance`
    throw new UnreadableError({ code: 'unit-conflict', line, column: name, found: named, expected })
  }
  return unit
}

/** The refusal of a file whose header line is not there. */
export function headerMissing(line: number, found: string): UnreadableError {
  return new UnreadableError({ code: 'no-header', line, column: WHOLE_FILE, found, expected: `the column names in line ${line}` })
}
