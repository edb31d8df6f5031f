import type { ScenarioSample } from '#fixtures/scenario/run-records.ts'
import { momentsOf } from '#shared/statistics/summary.ts'
import { newId } from '../../models/new-id.ts'
import type { DemoPeople } from './demo-people.ts'
import { idOf, type DemoMasters } from './store-masters.ts'

/** As the columns keep it, so that what is judged and signed is what can be read again. */
function rounded(value: number, decimals: number): number {
  return Number(value.toFixed(decimals))
}

/** Net by the capsule's own shell, or by the mean tare of the sample, in mg. */
function netOf({ tare }: ScenarioSample, grossMg: number, shellMg: number | null): number {
  return rounded(grossMg - (shellMg ?? rounded(tare.meanMg, 4)), 3)
}

/** The net weights of a sample as they stand: corrections in place of what was typed first, in mg. */
export function standingNetMg(sample: ScenarioSample): number[] {
  const corrected = new Map(sample.corrections.map(({ ordinal, grossMg }) => [ordinal, grossMg]))
  return sample.weighings.map(({ grossMg, shellMg }, place) => netOf(sample, corrected.get(place + 1) ?? grossMg, shellMg))
}

/** A sample gets its figures when it is complete; one broken off keeps its count alone. */
function summaryColumns(sample: ScenarioSample) {
  const none = { meanMg: null, sdMg: null, rangeMg: null, minMg: null, maxMg: null }
  if (sample.state !== 'complete') return { n: sample.state === 'abandoned' ? sample.weighings.length : 0, ...none }
  const { n, mean, sumOfSquares, min, max } = momentsOf(standingNetMg(sample))
  const sdMg = rounded(Math.sqrt(sumOfSquares / (n - 1)), 4)
  return { n, meanMg: rounded(mean, 4), sdMg, rangeMg: rounded(max - min, 3), minMg: min, maxMg: max }
}

/** The last check before a moment that the balance passed: what the sample relies on. */
function checkBefore(masters: DemoMasters, balance: string, at: Date): string | null {
  return masters.checks.get(balance)?.findLast(({ checkedAt, hasPassed }) => hasPassed && checkedAt <= at)?.id ?? null
}

export interface SampleForm {
  batchId: string
  toolingSetId: string
  masters: DemoMasters
  people: DemoPeople
}

/** The row of one sample, without its verdict. */
export function sampleRow(sample: ScenarioSample, { batchId, toolingSetId, masters, people }: SampleForm) {
  const { sequence, kind, basis, state, plannedN, tare, firstSegment, dueAt, startedAt, completedAt, capsulesMade, entry, isLate } = sample
  return {
    id: newId(),
    ...{ batchId, sequence, kind, basis, state, plannedN, ...summaryColumns(sample), toolingSetId },
    shellLotId: idOf(masters.shellLots, sample.shellLot),
    ...{ tareMeanMg: rounded(tare.meanMg, 4), tareSdMg: rounded(tare.sdMg, 4), tareN: tare.n },
    balanceId: idOf(masters.balances, sample.balance),
    balanceCheckId: checkBefore(masters, sample.balance, startedAt),
    ...{ firstSegment, dueAt, startedAt, completedAt, capsulesMade, entry, isLate },
    weighedById: people.find(sample.weighedBy).id,
    correctionCount: sample.corrections.length,
    abandonedReason: sample.abandonedReason,
    excludedReason: sample.excluded?.reason ?? null,
    excludedById: sample.excluded ? people.find(sample.excluded.by).id : null,
    ...{ createdAt: startedAt, updatedAt: completedAt ?? startedAt },
  }
}
export type SampleRow = ReturnType<typeof sampleRow>

/** Farther than this share of the target from it, a reading is asked about and then marked. */
const PLAUSIBLE_SHARE = 0.3

export function weighingRows(
  sample: ScenarioSample,
  { id: sampleId, weighedById }: Pick<SampleRow, 'id' | 'weighedById'>,
  targetFillMg: number,
) {
  return sample.weighings.map((weighing, place) => {
    const netMg = netOf(sample, weighing.grossMg, weighing.shellMg)
    const isQuestioned = Math.abs(netMg - targetFillMg) > PLAUSIBLE_SHARE * targetFillMg
    return { ...weighing, sampleId, ordinal: place + 1, netMg, isQuestioned, entry: sample.entry, weighedById }
  })
}

export function correctionRows(sample: ScenarioSample, sampleId: string, people: DemoPeople) {
  return sample.corrections.map(({ ordinal, position, grossMg, reason, correctedBy, correctedAt }) => {
    const shellMg = sample.weighings[ordinal - 1]?.shellMg ?? null
    const fixed = { position, grossMg, shellMg, netMg: netOf(sample, grossMg, shellMg), shownDecimals: 1 }
    return { sampleId, ordinal, version: 2, ...fixed, reason, correctedById: people.find(correctedBy).id, correctedAt }
  })
}
