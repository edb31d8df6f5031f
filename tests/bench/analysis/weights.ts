import { subgroupsOfSize, type Subgroups } from '#shared/statistics/subgroups.ts'

export const WEIGHTS = 1_000_000
export const SUBGROUP_SIZE = 10
/** Specification limits and the place in the middle, mg. */
export const SPECIFICATION = { lower: 332, upper: 368, target: 350 }

/** Net fills of 350 mg with an SD of 4 mg, drawn from a fixed seed so that every program sees the same ones. */
export function drawWeights(): Float64Array {
  let state = 20_260_412
  const uniform = (): number => {
    state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0
    return (state + 0.5) / 2 ** 32
  }
  return Float64Array.from({ length: WEIGHTS }, () => 350 + 4 * Math.sqrt(-2 * Math.log(uniform())) * Math.cos(2 * Math.PI * uniform()))
}

/** The same weights in subgroups. */
export function inSubgroups(weights: Float64Array): Subgroups {
  return subgroupsOfSize(weights, SUBGROUP_SIZE)
}

/** The measure of this machine in this minute: one pass that sums the array twenty times. */
export function yardstick(weights: Float64Array): number {
  let total = 0
  for (let round = 0; round < 20; round++) for (let i = 0; i < weights.length; i++) total += weights[i]!
  return total
}
