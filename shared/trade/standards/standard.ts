import type { WeighingBasis } from '#shared/vocabulary.ts'

/** Whether the figures rest on weights that the standard asks for; `indicative` supports no compendial claim. */
export type AcceptanceBasis = 'compendial' | 'indicative'

export interface Limits {
  lower: number
  upper: number
}

/** One step of a standard, in the order in which it is reached. */
export interface Stage {
  stage: number
  /** How many units are judged at this stage. */
  n: number
  rule: string
}

/** A test of acceptance: what it is called, which text it follows, and how it judges. */
export interface AcceptanceStandard<Request, Answer> {
  id: string
  title: string
  /** The text whose rule is coded; a person compares it with the text in force. */
  edition: string
  stages: readonly Stage[]
  judge: (request: Request) => Answer
}

/** What every verdict carries beside its figures. */
export interface Explained {
  edition: string
  basis: AcceptanceBasis
  /** Why the verdict is what it is, in sentences. */
  reasons: string[]
  /** The same, line by line, to be followed with a pocket calculator. */
  arithmetic: string[]
}

/** A figure as the arithmetic shows it: enough digits to follow, no trailing zeros. */
export function shown(value: number, decimals = 4): string {
  return String(Number(value.toFixed(decimals)))
}

/** Counted from 1, as a person counts the rows of a weighing sheet. */
export function shownPlaces(places: readonly number[]): string {
  return places.length === 0 ? 'none' : places.map((place) => `no. ${place + 1}`).join(', ')
}

/**
 * The places, counted from 0, of the values beyond the limits. A value on a limit is within: a difference of less than
 * one part in 10^10 is the rounding of binary arithmetic and no balance could show it.
 */
export function placesBeyond(values: ArrayLike<number>, { lower, upper }: Limits): number[] {
  const slack = 1e-10 * Math.max(Math.abs(lower), Math.abs(upper))
  const places: number[] = []
  for (let place = 0; place < values.length; place++) {
    const value = values[place]!
    if (lower - value > slack || value - upper > slack) places.push(place)
  }
  return places
}

/** The limits that lie a percentage of the centre to either side of it. */
export function limitsAround(centre: number, percent: number): Limits {
  return { lower: centre * (1 - percent / 100), upper: centre * (1 + percent / 100) }
}

/**
 * What the way of weighing allows to be claimed: the standards ask for the contents of each unit, and only the shell of
 * that same unit gives them.
 */
export function judgeBasis(weighingBasis: WeighingBasis): { basis: AcceptanceBasis; reasons: string[] } {
  if (weighingBasis === 'net-individual') return { basis: 'compendial', reasons: [] }
  const why =
    weighingBasis === 'gross'
      ? 'the weights include the shells'
      : 'one mean shell weight was subtracted from all units, which adds the scatter of the shells to that of the fill'
  return { basis: 'indicative', reasons: [`Indicative only: ${why}. A compendial claim needs each unit weighed against its own shell.`] }
}
