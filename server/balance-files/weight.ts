import type { BalanceFileProblemCode } from '#shared/schemas/balance-files.ts'

export type WeightUnit = 'g' | 'mg'
export type WeightMark = 'net' | 'gross'

/** A number as the balance showed it, with every digit, and what stood around it. */
export interface ShownWeight {
  /** The digits and the decimal sign as written. */
  shown: string
  unit: WeightUnit | null
  mark: WeightMark | null
  /** A word before the number that is no mark: the reader decides whether it means stable. */
  word: string | null
  isNegative: boolean
}

export interface WeightProblem {
  code: BalanceFileProblemCode
  expected: string
}

export const MAX_WEIGHT_MG = 5000
/** Weights are kept to 0.001 mg; a reading with more would be rounded in silence, so it is refused. */
const MAX_DECIMALS_MG = 3

const SHAPE = /^(?:(\p{L}{1,8})\s+)?([+\-−]?)\s*(\d{1,12}(?:([.,])(\d{1,12}))?)\s*([\p{L}µ/%]{1,8})?$/u
const OTHER_NUMBER = /^[+-]?[\d.,]*\d(?:e[+-]?\d+)?$/i
const TROUBLE = /over|under|err|unstab|dynam|motion|invalid|fail|^(?:ol|ul|h|l|e\d+|nan|inf\w*)$|^[-_^~=\s]+$|[?*~]/i
const MARKS: Readonly<Record<string, WeightMark>> = { n: 'net', net: 'net', g: 'gross', b: 'gross', gross: 'gross' }
const TARES = new Set(['t', 'pt', 'tare'])

/** Reads the text of a weight cell. A mark of trouble (unstable, overload, error) never becomes a number (requirement C17). */
export function readShownWeight(cell: string, decimal: '.' | ','): ShownWeight | WeightProblem {
  const match = SHAPE.exec(cell)
  if (!match) return refuseShape(cell, decimal)
  const [, word, sign, shown = '', separator, , unitText] = match
  if (separator !== undefined && separator !== decimal)
    return { code: 'not-a-number', expected: `a number with a decimal ${decimal === '.' ? 'point' : 'comma'}` }
  const unit = unitText === undefined ? null : readUnit(unitText)
  if (unit === undefined) return { code: 'unknown-unit', expected: 'the unit g or mg' }
  const prefix = word?.toLowerCase() ?? null
  if (prefix !== null && TARES.has(prefix)) return { code: 'not-a-weight', expected: 'the weight of a capsule, not a tare' }
  const mark = prefix === null ? null : (MARKS[prefix] ?? null)
  return { shown, unit, mark, word: mark === null ? prefix : null, isNegative: sign === '-' || sign === '−' }
}

function refuseShape(cell: string, decimal: '.' | ','): WeightProblem {
  if (cell === '') return { code: 'not-a-weight', expected: 'a weight' }
  if (TROUBLE.test(cell)) return { code: 'unstable-reading', expected: 'a stable reading without a mark of trouble' }
  if (OTHER_NUMBER.test(cell))
    return { code: 'not-a-number', expected: `plain digits with a decimal ${decimal === '.' ? 'point' : 'comma'}` }
  return { code: 'not-a-number', expected: 'a number' }
}

/** The unit that a text names; undefined where it names none that is known. */
export function readUnit(text: string): WeightUnit | undefined {
  const unit = text.trim().toLowerCase()
  return unit === 'g' || unit === 'mg' ? unit : undefined
}

/** How many decimals of a milligram the digits show: 0.4961 g shows one, 496.10 mg two. */
export function shownDecimalsMg(shown: string, unit: WeightUnit): number {
  const separator = Math.max(shown.indexOf('.'), shown.indexOf(','))
  const decimals = separator < 0 ? 0 : shown.length - separator - 1
  return unit === 'mg' ? decimals : Math.max(0, decimals - 3)
}

/** The digits in milligrams, converted by moving the decimal sign so that 0.4961 g is 496.1 mg exactly. */
export function toMilligrams(shown: string, unit: WeightUnit): number {
  const digits = shown.replace(',', '.')
  return Number(unit === 'mg' ? digits : `${digits}e3`)
}

/** Checks sign, size and decimals; readabilityMg is the smallest step that the balance can show. */
export function checkWeight(
  weight: { weightMg: number; decimalsMg: number; isNegative: boolean },
  readabilityMg?: number,
): WeightProblem | undefined {
  const { weightMg, decimalsMg, isNegative } = weight
  if (isNegative || weightMg <= 0) return { code: 'implausible-weight', expected: 'a weight above 0 mg' }
  if (weightMg > MAX_WEIGHT_MG) return { code: 'implausible-weight', expected: `a weight up to ${MAX_WEIGHT_MG} mg` }
  const maxDecimals = maxDecimalsMg(readabilityMg)
  if (decimalsMg > maxDecimals) return { code: 'too-many-decimals', expected: `at most ${maxDecimals} decimals of a milligram` }
  return undefined
}

/** Decimals of a milligram that a balance of this readability can show, at most the three that the record keeps. */
export function maxDecimalsMg(readabilityMg?: number): number {
  if (readabilityMg === undefined) return MAX_DECIMALS_MG
  return Math.min(MAX_DECIMALS_MG, Math.max(0, Math.ceil(-Math.log10(readabilityMg) - 1e-9)))
}
