import type { StatisticsErrorCode } from '#shared/statistics/errors.ts'
import type { Change, comparePlans, operatingCharacteristic, PlanOption, WatchPlan } from '#shared/statistics/operating-characteristic.ts'
import type { PassBound, SampledContents } from '#shared/statistics/pass-bound.ts'
import type { PassProbability, SimulationSize } from '#shared/statistics/pass-probability.ts'
import type { RunLengthAnswer, RunLengthRequest } from '#shared/statistics/run-length.ts'
import type { TuningAdvice, TuningRequest } from '#shared/trade/tuning-advice.ts'
import type { ChanceRequest } from '#shared/trade/standards/chance-of-passing.ts'

/** What a thread is asked to work out. */
export type SimulationTask =
  | { kind: 'run-length'; request: RunLengthRequest }
  | { kind: 'chance-of-passing'; request: ChanceRequest }
  | { kind: 'pass-bound'; sample: SampledContents; size: SimulationSize }
  | { kind: 'operating-characteristic'; plan: WatchPlan; changes: readonly Change[] }
  | { kind: 'tuning'; request: TuningRequest }
  | { kind: 'compare-plans'; plan: WatchPlan; change: Change; options: readonly PlanOption[] }

/** What it answers, by kind. */
export interface SimulationResults {
  'run-length': RunLengthAnswer
  'chance-of-passing': PassProbability
  'pass-bound': PassBound
  'operating-characteristic': ReturnType<typeof operatingCharacteristic>
  tuning: TuningAdvice
  'compare-plans': ReturnType<typeof comparePlans>
}

export type SimulationReply =
  { result: SimulationResults[SimulationTask['kind']] } | { refused: { code: StatisticsErrorCode; argument: string; message: string } }
