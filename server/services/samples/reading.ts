import type { CorrectWeighing, PutWeighing } from '#shared/schemas/samples.ts'
import { centreOf } from '#shared/trade/judge-sample.ts'
import { ConflictError, InvalidFieldError } from '../../errors.ts'
import type { SampleContext } from './sample-context.ts'

/** Farther from the expected weight than this share of the target, a reading is asked about once (requirement D16). */
const PLAUSIBLE_SHARE = 0.3

/** The three quantities of one capsule in mg, by the basis of the sample. */
export interface Reading {
  grossMg: number | null
  shellMg: number | null
  netMg: number | null
}

type Weights = Pick<PutWeighing | CorrectWeighing, 'grossMg' | 'shellMg' | 'netMg' | 'shownDecimals'>

/** Decimals of a milligram that a balance shows: readability 0.1 mg shows one. */
function decimalsOf(readabilityMg: number): number {
  return Math.max(0, Math.ceil(-Math.log10(readabilityMg) - 1e-9))
}

function requireShownDecimals({ balance }: SampleContext, { shownDecimals, ...weights }: Weights): void {
  if (balance && shownDecimals > decimalsOf(balance.readabilityMg)) {
    throw new InvalidFieldError(
      '/shownDecimals',
      `Balance ${balance.code} shows steps of ${balance.readabilityMg} mg; a reading with ${shownDecimals} decimals is not from it.`,
    )
  }
  for (const [field, value] of Object.entries(weights)) {
    if (typeof value !== 'number') continue
    if (Math.abs(value * 10 ** shownDecimals - Math.round(value * 10 ** shownDecimals)) > 1e-6) {
      throw new InvalidFieldError(`/${field}`, `${value} mg has more decimals than the ${shownDecimals} that were shown.`)
    }
  }
}

/** Gross, shell and net by the sample's basis; a number never loses its basis. */
export function readingOf(context: SampleContext, weights: Weights): Reading {
  requireShownDecimals(context, weights)
  const { grossMg, shellMg, netMg } = weights
  const { basis, tareMeanMg } = context.sample
  if (basis === 'net-individual') return individualReading(grossMg, shellMg, netMg)
  if (grossMg === undefined) throw new InvalidFieldError('/grossMg', 'Send the gross weight, as the balance shows the filled capsule.')
  if (shellMg !== undefined || netMg !== undefined)
    throw new InvalidFieldError(
      '/netMg',
      `This sample is weighed ${basis === 'gross' ? 'gross' : 'gross, net by mean tare'}; send the gross weight alone.`,
    )
  if (basis === 'gross' || tareMeanMg === null) return { grossMg, shellMg: null, netMg: null }
  if (grossMg <= tareMeanMg)
    throw new InvalidFieldError('/grossMg', `${grossMg} mg is no more than an empty shell (${tareMeanMg.toFixed(1)} mg).`)
  return { grossMg, shellMg: null, netMg: grossMg - tareMeanMg }
}

function individualReading(grossMg: number | undefined, shellMg: number | undefined, netMg: number | undefined): Reading {
  if (netMg !== undefined && grossMg === undefined && shellMg === undefined) return { grossMg: null, shellMg: null, netMg }
  if (grossMg === undefined || shellMg === undefined || netMg !== undefined) {
    throw new InvalidFieldError('/grossMg', 'Send the gross weight and the weight of its own empty shell, or the net weight alone.')
  }
  if (grossMg <= shellMg)
    throw new InvalidFieldError('/shellMg', `The shell (${shellMg} mg) weighs no less than the filled capsule (${grossMg} mg).`)
  return { grossMg, shellMg, netMg: grossMg - shellMg }
}

/** The figure that is charted and judged. */
export function valueOf(basis: string, { grossMg, netMg }: Pick<Reading, 'grossMg' | 'netMg'>): number {
  const value = basis === 'gross' ? grossMg : netMg
  if (value === null) throw new Error('A weighing lacks the quantity that its sample is judged by.')
  return value
}

/** Asks once about a weight far from what is expected; a confirmed one is kept and marked. */
export function requirePlausible({ sample, product }: SampleContext, value: number, isConfirmed: boolean): boolean {
  const { basis, tareMeanMg } = sample
  const centre = centreOf({ basis, targetFillMg: product.targetFillMg, tareMeanMg })
  const isDoubtful = Math.abs(value - centre) > PLAUSIBLE_SHARE * product.targetFillMg
  if (isDoubtful && !isConfirmed) {
    throw new ConflictError('implausible-weight', `${value.toFixed(1)} mg is far from the expected ${centre.toFixed(1)} mg. Is it right?`, {
      valueMg: value,
      expectedMg: centre,
    })
  }
  return isDoubtful
}

/** Where a capsule stood: as stated, or in index order from the first segment on. */
export function placeOf(
  { sample, machine }: SampleContext,
  ordinal: number,
  stated: { position?: number | undefined; segment?: number | undefined },
): { position: number; segment: number | null } {
  const { boresPerGroup, segments } = machine
  if (stated.position !== undefined && stated.position > boresPerGroup) {
    throw new InvalidFieldError(
      '/position',
      `Machine ${machine.code} has positions 1 to ${boresPerGroup}; ${stated.position} is not one of them.`,
    )
  }
  if (stated.segment !== undefined && stated.segment > segments) {
    throw new InvalidFieldError('/segment', `Machine ${machine.code} has segments 1 to ${segments}; ${stated.segment} is not one of them.`)
  }
  const index = Math.floor((ordinal - 1) / boresPerGroup)
  const segment = sample.firstSegment === null ? null : ((sample.firstSegment - 1 + index) % segments) + 1
  return { position: stated.position ?? ((ordinal - 1) % boresPerGroup) + 1, segment: stated.segment ?? segment }
}
