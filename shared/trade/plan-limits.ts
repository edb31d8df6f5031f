/** The fill weights of a product that a control plan is held against, mg. */
export interface Specification {
  targetFillMg: number
  lowerSpecificationMg: number
  upperSpecificationMg: number
}

/** The limits of a plan in percent of the target, each to both sides. */
export interface PlanLimits {
  meanAlertPercent: number
  meanActionPercent: number
  individualAlertPercent: number
  individualActionPercent: number
}

export interface Band {
  lowerMg: number
  upperMg: number
}

/**
 * A limit in percent as a band of weights: target · (1 ± percent/100).
 * @param targetFillMg mg
 * @param percent of the target, to each side
 */
export function limitBand(targetFillMg: number, percent: number): Band {
  return { lowerMg: targetFillMg * (1 - percent / 100), upperMg: targetFillMg * (1 + percent / 100) }
}

/** A rounding error of percent arithmetic is no wider limit. */
const TOLERANCE_MG = 1e-9

/**
 * The action limits of a plan that are wider than the specification of its product: such a plan could call a fill
 * good that the specification refuses, so it is refused itself.
 * @returns the names of the fields at fault; empty where the plan fits
 * @see 21 CFR 211.110(b): in-process limits are consistent with the final specification
 */
export function limitsBeyondSpecification(
  { targetFillMg, lowerSpecificationMg, upperSpecificationMg }: Specification,
  plan: PlanLimits,
): ('meanActionPercent' | 'individualActionPercent')[] {
  return (['meanActionPercent', 'individualActionPercent'] as const).filter((field) => {
    const { lowerMg, upperMg } = limitBand(targetFillMg, plan[field])
    return lowerMg < lowerSpecificationMg - TOLERANCE_MG || upperMg > upperSpecificationMg + TOLERANCE_MG
  })
}
