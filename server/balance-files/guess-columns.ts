import type { BalanceFileRole } from '#shared/schemas/balance-files.ts'
import { ROLE_NAMES } from './role-names.ts'
import { isWeightCell } from './sniff.ts'
import { readUnit } from './weight.ts'

const ORDER: readonly BalanceFileRole[] = ['unit', 'status', 'sample', 'segment', 'position', 'date', 'time', 'weight']
const DATE_SHAPE = /\d{1,4}[-/.]\d{1,2}[-/.]\d{1,4}/
const TIME_SHAPE = /\d{1,2}:\d{2}/
const STABLE = /^(?:s|st|stable|ok|stabil|stabile?|estable)$/i

/** The words of a status column that look like "stable". */
export function guessStableWords(cells: readonly string[]): string[] {
  return [...new Set(cells.map((cell) => cell.trim()))].filter((cell) => STABLE.test(cell))
}

/** Guesses what each column holds, by its name and then by its cells; null where nothing fits. */
export function guessRoles(
  header: readonly string[] | null,
  rows: readonly (readonly string[])[],
  decimal: '.' | ',',
): (BalanceFileRole | null)[] {
  const width = Math.max(header?.length ?? 0, ...rows.map((cells) => cells.length))
  const roles = Array.from({ length: width }, (): BalanceFileRole | null => null)
  const column = (place: number): string[] => rows.map((cells) => (cells[place] ?? '').trim())
  for (const role of ORDER) {
    const place = roles.findIndex(
      (taken, at) => taken === null && ROLE_NAMES[role].test(header?.[at] ?? '') && fits(role, column(at), decimal),
    )
    if (place >= 0) roles[place] = role
  }
  if (!roles.includes('weight')) assign(roles, 'weight', likeliestWeight(roles, column, decimal))
  for (const role of ['unit', 'time', 'status'] as const) {
    const isOwn = { unit: isUnitColumn, time: isTimeColumn, status: isStatusColumn }[role]
    if (!roles.includes(role))
      assign(
        roles,
        role,
        roles.findIndex((taken, at) => taken === null && isOwn(column(at))),
      )
  }
  // A date column alone says no time; a time column that already shows a date needs no other.
  const date = roles.indexOf('date')
  const time = roles.indexOf('time')
  if (date >= 0 && time < 0) roles[date] = isTimeColumn(column(date)) ? 'time' : null
  if (date >= 0 && time >= 0 && column(time).some((cell) => DATE_SHAPE.test(cell))) roles[date] = null
  return roles
}

function assign(roles: (BalanceFileRole | null)[], role: BalanceFileRole, place: number): void {
  if (place >= 0) roles[place] = role
}

function fits(role: BalanceFileRole, cells: readonly string[], decimal: '.' | ','): boolean {
  if (role === 'weight') return cells.some((cell) => isWeightCell(cell, decimal))
  if (role === 'position' || role === 'segment') return cells.some((cell) => /^\d+$/.test(cell))
  if (role === 'time') return cells.some((cell) => TIME_SHAPE.test(cell))
  if (role === 'date') return cells.some((cell) => DATE_SHAPE.test(cell))
  return cells.some((cell) => cell !== '')
}

/** Of the columns of numbers, the one with most decimals, then with the largest numbers: counters have neither. */
function likeliestWeight(roles: readonly (BalanceFileRole | null)[], column: (place: number) => string[], decimal: '.' | ','): number {
  let best = { place: -1, score: -1 }
  for (const [place, role] of roles.entries()) {
    const cells = column(place).filter((cell) => isWeightCell(cell, decimal))
    if (role !== null || cells.length === 0) continue
    const decimals = cells.filter((cell) => cell.includes(decimal)).length / cells.length
    const size =
      cells.reduce((sum, cell) => sum + (Number.parseFloat(cell.replace(/[^\d.,]/g, '').replace(',', '.')) || 0), 0) / cells.length
    const score = decimals * 1e6 + Math.min(size, 1e5)
    if (score > best.score) best = { place, score }
  }
  return best.place
}

function isUnitColumn(cells: readonly string[]): boolean {
  return cells.length > 0 && cells.every((cell) => cell === '' || readUnit(cell) !== undefined) && cells.some((cell) => cell !== '')
}

function isTimeColumn(cells: readonly string[]): boolean {
  return (
    cells.length > 0 &&
    cells.every((cell) => cell === '' || (TIME_SHAPE.test(cell) && DATE_SHAPE.test(cell))) &&
    cells.some((cell) => cell !== '')
  )
}

function isStatusColumn(cells: readonly string[]): boolean {
  const words = cells.filter((cell) => cell !== '')
  return words.length > 0 && words.filter((cell) => STABLE.test(cell)).length > words.length / 2
}
