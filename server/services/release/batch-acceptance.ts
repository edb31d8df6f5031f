import type { AcceptanceResult } from '#shared/schemas/release.ts'
import { StatisticsError } from '#shared/statistics/errors.ts'
import { judgeUniformity } from '#shared/trade/standards/index.ts'
import type { AcceptanceStandard, WeighingBasis } from '#shared/vocabulary.ts'
import type { Batch } from '../../models/batch.ts'
import type { Product } from '../../models/product.ts'
import type { RecordedSample } from './recorded-samples.ts'

/** Units that each standard judges at its first or only step. */
const UNITS: Record<AcceptanceStandard, number> = { 'usp-905-weight': 30, 'usp-2091': 20, 'ph-eur-2.9.5': 20 }
const FEWER_UNITS = 10

/** Weights from the end sample where it is large enough, else spread evenly over the whole run. */
function chooseUnits(
  samples: readonly RecordedSample[],
  wanted: number,
): { weights: RecordedSample['weighings']; basis: WeighingBasis; from: string } | undefined {
  const complete = samples.filter(
    ({ state, excludedReason, kind }) => state === 'complete' && excludedReason === null && kind !== 'start-up',
  )
  const end = complete.findLast(({ kind, weighings }) => kind === 'end' && weighings.length >= wanted)
  if (end)
    return { weights: end.weighings.slice(0, wanted), basis: end.basis, from: `the first ${wanted} capsules of end sample ${end.sequence}` }
  const all = complete.flatMap(({ weighings }) => weighings)
  const [first] = complete
  if (all.length < wanted || !first) return undefined
  const weights = Array.from({ length: wanted }, (_, place) => all[Math.floor((place * all.length) / wanted)]).filter(
    (weight) => weight !== undefined,
  )
  return { weights, basis: first.basis, from: `${wanted} capsules spread evenly over ${all.length} of the run` }
}

function judge(standard: AcceptanceStandard, weights: RecordedSample['weighings'], basis: WeighingBasis, assayPercent: number | null) {
  const netMg = weights.map(({ netMg: net, grossMg }) => net ?? grossMg ?? 0)
  switch (standard) {
    case 'usp-905-weight':
      return judgeUniformity({ standard, weights: netMg, assayPercent: assayPercent ?? 100, weighingBasis: basis })
    case 'usp-2091':
      return judgeUniformity({ standard, gross: weights.map(({ grossMg, netMg: net }) => grossMg ?? net ?? 0) })
    case 'ph-eur-2.9.5':
      return judgeUniformity({ standard, net: netMg, weighingBasis: basis })
  }
}

function notYet(standard: string, headline: string): AcceptanceResult {
  return { standard, edition: '', verdict: 'not-yet', basis: '', n: 0, headline, arithmetic: [], reasons: [] }
}

function resultOf(standard: AcceptanceStandard, samples: readonly RecordedSample[], assayPercent: number | null): AcceptanceResult {
  const chosen = chooseUnits(samples, UNITS[standard]) ?? chooseUnits(samples, FEWER_UNITS)
  if (!chosen || (standard !== 'usp-905-weight' && chosen.weights.length < UNITS[standard]))
    return notYet(standard, `${UNITS[standard]} weights are needed; the batch does not have them yet.`)
  if (standard === 'usp-905-weight' && assayPercent === null)
    return notYet(standard, 'The assay of the blend is not entered yet; without it no contents can be estimated from weights.')
  try {
    const { verdict, edition, basis, arithmetic, reasons } = judge(standard, chosen.weights, chosen.basis, assayPercent)
    return { standard, edition, verdict, basis, n: chosen.weights.length, headline: `From ${chosen.from}.`, arithmetic, reasons }
  } catch (error) {
    if (error instanceof StatisticsError) return notYet(standard, error.message)
    throw error
  }
}

/** Every acceptance standard of the product, worked through with the weights of the batch. A statistical verdict is no regulatory approval. */
export function judgeAcceptance(
  batch: Pick<Batch, 'assayPercent'>,
  product: Pick<Product, 'acceptanceStandards'>,
  samples: readonly RecordedSample[],
): AcceptanceResult[] {
  return product.acceptanceStandards.map((standard) => resultOf(standard, samples, batch.assayPercent))
}
