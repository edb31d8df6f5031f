import { parseNumber, shownDecimals } from '@/format/parse-number.ts'

export type ParsedWeight = { ok: true; weightMg: number; decimals: number } | { ok: false; reason: string }

/** A capsule that weighs more than this is not a capsule; the server refuses it too. */
const MOST_MG = 5_000

/**
 * A reading as a person or a balance types it: "495.6", "495,6", also with "mg" or "g" behind it. Signs of an unstable or
 * overloaded balance never become a number.
 */
export function parseWeightMg(text: string): ParsedWeight {
  const reading = /^\s*([+-]?[\d.,]+)\s*(mg|g)?\s*$/i.exec(text)
  if (!reading) return { ok: false, reason: `“${text.trim()}” is not a weight; a number in mg is expected.` }
  const [, digits = '', unit = 'mg'] = reading
  const value = parseNumber(digits)
  if (value === undefined) return { ok: false, reason: `“${digits}” is not one number.` }
  const isGrams = unit.toLowerCase() === 'g'
  const decimals = isGrams ? Math.max(0, shownDecimals(digits) - 3) : shownDecimals(digits)
  const weightMg = isGrams ? Number((value * 1_000).toFixed(decimals)) : value
  if (weightMg <= 0) return { ok: false, reason: 'A weight is above zero.' }
  if (weightMg > MOST_MG) return { ok: false, reason: `${weightMg} mg is more than a capsule weighs.` }
  return { ok: true, weightMg, decimals }
}
