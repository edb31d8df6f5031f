import { CAPSULE_SIZES } from '#shared/trade/capsule-sizes.ts'
import { RUN_TESTS } from '#shared/statistics/run-tests/index.ts'
import type {
  AcceptanceStandard,
  BalanceCheckKind,
  ChartKind,
  ControlPlanState,
  ToolingPartKind,
  WeighingBasis,
} from '#shared/vocabulary.ts'

export interface Choice<V extends string | number> {
  value: V
  word: string
}

function choices<V extends string>(words: Record<V, string>): Choice<V>[] {
  // The keys of a literal record are exactly its key type.
  return (Object.keys(words) as V[]).map((value) => ({ value, word: words[value] }))
}

export const STANDARD_WORDS: Record<AcceptanceStandard, string> = {
  'usp-905-weight': 'USP <905> by weight variation',
  'usp-2091': 'USP <2091> weight variation of supplements',
  'ph-eur-2.9.5': 'Ph. Eur. 2.9.5 uniformity of mass',
}
export const CHART_WORDS: Record<ChartKind, string> = {
  'xbar-s': 'Means and standard deviations',
  'xbar-r': 'Means and ranges',
  individuals: 'Individuals and moving ranges',
}
export const BASIS_CHOICE_WORDS: Record<WeighingBasis, string> = {
  'net-mean-tare': 'Net by mean tare',
  'net-individual': 'Net by individual shell',
  gross: 'Gross',
}
export const PLAN_STATE_WORDS: Record<ControlPlanState, string> = {
  proposed: 'Proposed, not in force',
  approved: 'In force',
  superseded: 'Superseded',
  withdrawn: 'Withdrawn',
}
export const PART_WORDS: Record<ToolingPartKind, string> = {
  'dosing-disc': 'Dosing disc',
  'tamping-pins': 'Tamping pins',
  'transfer-pins': 'Transfer pins',
  'seal-ring': 'Seal ring',
  segments: 'Segments',
  bushes: 'Bushes',
  springs: 'Springs',
  scraper: 'Scraper',
}
export const CHECK_WORDS: Record<BalanceCheckKind, string> = {
  daily: 'Daily check',
  calibration: 'Calibration',
  repeatability: 'Repeatability',
}

export const SIZE_CHOICES: Choice<string>[] = CAPSULE_SIZES.map(({ size }) => ({ value: size, word: `Size ${size}` }))
export const RUN_TEST_CHOICES: Choice<number>[] = RUN_TESTS.map(({ number, title }) => ({ value: number, word: title }))
export const STANDARD_CHOICES = choices(STANDARD_WORDS)
export const CHART_CHOICES = choices(CHART_WORDS)
export const BASIS_CHOICES = choices(BASIS_CHOICE_WORDS)
export const PART_CHOICES = choices(PART_WORDS)
export const CHECK_CHOICES = choices(CHECK_WORDS)
