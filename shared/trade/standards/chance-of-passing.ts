import { requireFinite, requirePositive, StatisticsError } from '#shared/statistics/errors.ts'
import { normalDraws } from '#shared/statistics/normal-draws.ts'
import { checkedSize, passProbability, shareOf, type PassProbability, type SimulationSize } from '#shared/statistics/pass-probability.ts'
import { seededRandom } from '#shared/statistics/random.ts'
import { judgeUniformity } from './index.ts'

/** The chance of passing each standard, from what is known of the batch. */
export type ChanceRequest = SimulationSize &
  (
    | { standard: 'usp-905'; mean: number; sd: number; target?: number | undefined }
    | { standard: 'usp-905-weight'; mean: number; sd: number; assayPercent: number; target?: number | undefined }
    | { standard: 'usp-2091'; mean: number; sd: number; shell: { mean: number; sd: number } }
    | { standard: 'ph-eur-2.9.5'; mean: number; sd: number }
  )

/** Whole verdicts are slower than the bare rule of <905>, so fewer of them are simulated. */
const LOTS_BY_VERDICT = 20_000

/**
 * The chance that a batch passes a standard, by seeded simulation of the verdict itself, all its stages included.
 * @param request `usp-905`: contents in percent of claim; the others: net fill in mg, for <2091> with the shells, in mg
 * @throws {StatisticsError} `not-finite`, `not-positive`, `out-of-range`, `not-whole`
 * @see docs/calculations/pass-probability.md
 */
export function chanceOfPassing(request: ChanceRequest): PassProbability {
  if (request.standard === 'usp-905') return passProbability(request, request)
  const { seed, lots } = checkedSize({ ...request, lots: request.lots ?? LOTS_BY_VERDICT })
  requirePositive('mean', request.mean)
  requireSpread('sd', request.sd)
  const draw = normalDraws(seededRandom(seed))
  // A weight below a hundredth of a milligram is none; it fails every standard as it stands.
  const weights = (n: number, { mean, sd }: { mean: number; sd: number }) =>
    Array.from({ length: n }, () => Math.max(0.01, mean + sd * draw()))
  const passesOnce = onceBy(request, weights)
  let passed = 0
  for (let lot = 0; lot < lots; lot++) if (passesOnce()) passed++
  return shareOf(passed, lots)
}

type Weights = (n: number, of: { mean: number; sd: number }) => number[]

function onceBy(request: Exclude<ChanceRequest, { standard: 'usp-905' }>, weights: Weights): () => boolean {
  switch (request.standard) {
    case 'usp-905-weight':
      return () => passesByWeight(request, weights)
    case 'usp-2091':
      requirePositive('shell.mean', request.shell.mean)
      requireSpread('shell.sd', request.shell.sd)
      return () => passes2091(request, weights)
    case 'ph-eur-2.9.5':
      return () => judgeUniformity({ standard: 'ph-eur-2.9.5', net: weights(20, request) }).verdict === 'pass'
  }
}

function passesByWeight(request: Extract<ChanceRequest, { standard: 'usp-905-weight' }>, weights: Weights): boolean {
  const { assayPercent, target } = request
  const verdictOn = (each: number[]) => judgeUniformity({ standard: 'usp-905-weight', weights: each, assayPercent, target }).verdict
  const ten = weights(10, request)
  const first = verdictOn(ten)
  return first === 'test-20-more' ? verdictOn([...ten, ...weights(20, request)]) === 'pass' : first === 'pass'
}

function passes2091(request: Extract<ChanceRequest, { standard: 'usp-2091' }>, weights: Weights): boolean {
  const capsules = (n: number) => {
    const shells = weights(n, request.shell)
    return { shells, gross: weights(n, request).map((fill, place) => fill + shells[place]!) }
  }
  const twenty = capsules(20)
  const { verdict } = judgeUniformity({ standard: 'usp-2091', ...twenty })
  if (verdict !== 'test-40-more') return verdict === 'pass'
  const more = capsules(40)
  const sixty = { gross: [...twenty.gross, ...more.gross], shells: [...twenty.shells, ...more.shells] }
  return judgeUniformity({ standard: 'usp-2091', ...sixty }).verdict === 'pass'
}

function requireSpread(argument: string, sd: number): void {
  requireFinite(argument, sd)
  if (sd < 0) throw new StatisticsError('out-of-range', argument, `${argument} cannot be negative.`)
}
