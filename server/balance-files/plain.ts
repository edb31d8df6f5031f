import type { Layout } from './columns.ts'
import type { RowLimits, WeighingRow } from './row.ts'
import { MAX_WEIGHT_MG, maxDecimalsMg, type WeightUnit } from './weight.ts'

const ZERO = 0x30
const NINE = 0x39
const POINT = 0x2e
const COMMA = 0x2c
const MAX_DIGITS = 12
const POWERS = Array.from({ length: MAX_DIGITS + 4 }, (_, exponent) => 10 ** exponent)

/**
 * Reads lines that hold nothing but digits, decimal signs and delimiters, one character at a time and several times
 * faster than by cells. A line with anything else, or out of any limit, is left to the full reader, so that both
 * always agree.
 */
export class PlainLines {
  private readonly weightPlace: number
  private readonly unit: WeightUnit
  private readonly delimiter: number
  private readonly decimal: number
  private readonly maxDecimals: number

  /** The plain reader for a layout, or undefined where a column needs more than digits. */
  static for(layout: Layout, signs: { delimiter: string; decimal: string }, limits: RowLimits): PlainLines | undefined {
    const { places, headerUnit, defaultUnit } = layout
    const needsText = [places.unit, places.time, places.date, places.status].some((place) => place !== undefined)
    const unit = headerUnit ?? defaultUnit
    return needsText || unit === null ? undefined : new PlainLines(layout, signs, limits, unit)
  }

  private constructor(
    private readonly layout: Layout,
    signs: { delimiter: string; decimal: string },
    private readonly limits: RowLimits,
    unit: WeightUnit,
  ) {
    this.weightPlace = layout.places.weight ?? 0
    this.unit = unit
    this.delimiter = signs.delimiter.charCodeAt(0)
    this.decimal = signs.decimal.charCodeAt(0)
    this.maxDecimals = maxDecimalsMg(limits.readabilityMg)
  }

  /** The weighing in text[start, end), or undefined where the line is not plain. */
  read(text: string, start: number, end: number, line: number): WeighingRow | undefined {
    const { places, width } = this.layout
    const row = emptyRow(line, this.unit)
    let place = 0
    for (let from = start; from <= end; place++) {
      const to = this.cellEnd(text, from, end)
      if (to < 0 || place >= width) return undefined
      if (place === this.weightPlace) {
        if (!this.readWeight(row, text, from, to)) return undefined
      } else if (place === places.position) {
        row.position = wholeNumber(text, from, to, this.limits.positions)
        if (row.position === 0) return undefined
      } else if (place === places.segment) {
        row.segment = wholeNumber(text, from, to, this.limits.segments)
        if (row.segment === 0) return undefined
      } else if (place === places.sample) {
        if (from === to) return undefined
        row.sample = text.slice(from, to)
      }
      from = to + 1
    }
    return place === width ? row : undefined
  }

  /** Where the cell ends; -1 where it holds more than digits and decimal signs. */
  private cellEnd(text: string, from: number, end: number): number {
    for (let at = from; at < end; at++) {
      const code = text.charCodeAt(at)
      if (code === this.delimiter) return at
      if ((code < ZERO || code > NINE) && code !== POINT && code !== COMMA) return -1
    }
    return end
  }

  private readWeight(row: WeighingRow, text: string, from: number, to: number): boolean {
    let mantissa = 0
    let separator = -1
    for (let at = from; at < to; at++) {
      const code = text.charCodeAt(at)
      if (code >= ZERO && code <= NINE) mantissa = mantissa * 10 + (code - ZERO)
      else if (code !== this.decimal || separator >= 0 || at === from || at === to - 1) return false
      else separator = at
    }
    if (to === from || to - from > MAX_DIGITS) return false
    const decimals = separator < 0 ? 0 : to - separator - 1
    const exponent = this.unit === 'g' ? 3 - decimals : -decimals
    const weightMg = exponent >= 0 ? mantissa * POWERS[exponent]! : mantissa / POWERS[-exponent]!
    row.weightMg = weightMg
    row.decimalsMg = Math.max(0, -exponent)
    row.shown = text.slice(from, to)
    return weightMg > 0 && weightMg <= MAX_WEIGHT_MG && row.decimalsMg <= this.maxDecimals
  }
}

function emptyRow(line: number, unit: WeightUnit): WeighingRow {
  return {
    line,
    sampleIndex: 0,
    sample: null,
    weightMg: 0,
    shown: '',
    unit,
    decimalsMg: 0,
    mark: null,
    position: null,
    segment: null,
    weighedAt: null,
    status: null,
  }
}

/** The whole number in a cell; 0 where it is none or above the limit. */
function wholeNumber(text: string, from: number, to: number, limit = 255): number {
  if (to === from || to - from > 6) return 0
  let value = 0
  for (let at = from; at < to; at++) {
    const digit = text.charCodeAt(at) - ZERO
    if (digit < 0 || digit > 9) return 0
    value = value * 10 + digit
  }
  return value <= limit ? value : 0
}
