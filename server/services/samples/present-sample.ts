import { z } from 'zod'
import { VerdictReason, type SampleAnswer, type SampleListItem, type WeighingAnswer } from '#shared/schemas/samples.ts'
import type { Sample } from '../../models/sample.ts'
import { userNames } from '../user-names.ts'
import { currentWeighings, type CurrentWeighing } from './current-weighings.ts'
import type { SampleContext } from './sample-context.ts'

/** A sample as a list shows it. */
export function presentSampleItem(sample: Sample): SampleListItem {
  const { id, batchId, sequence, kind, basis, state, plannedN, n, meanMg, sdMg, rangeMg, minMg, maxMg } = sample
  const { capsulesMade, entry, verdict, isLate, correctionCount, abandonedReason, excludedReason, version } = sample
  return {
    ...{ id, batchId, sequence, kind, basis, state, plannedN, n, meanMg, sdMg, rangeMg, minMg, maxMg },
    dueAt: sample.dueAt?.toISOString() ?? null,
    startedAt: sample.startedAt.toISOString(),
    completedAt: sample.completedAt?.toISOString() ?? null,
    ...{ capsulesMade, entry, verdict, isLate, correctionCount, abandonedReason, excludedReason, version },
  }
}

/** A weighing as it stands now. */
export function presentWeighing({ first, corrections, ...now }: CurrentWeighing, names: ReadonlyMap<string, string>): WeighingAnswer {
  const { ordinal, segment, shownDecimals, isQuestioned, entry, weighedAt } = first
  return {
    ...{ ordinal, segment, shownDecimals, isQuestioned, entry },
    ...{ position: now.position, grossMg: now.grossMg, shellMg: now.shellMg, netMg: now.netMg },
    weighedAt: weighedAt.toISOString(),
    version: corrections.at(-1)?.version ?? 1,
    corrections: corrections.map(({ version, grossMg, netMg, reason, correctedById, correctedAt }) => ({
      ...{ version, grossMg, netMg, reason },
      correctedBy: names.get(correctedById) ?? '',
      correctedAt: correctedAt.toISOString(),
    })),
  }
}

/** A sample with every capsule. */
export async function presentSample({ sample, balance }: SampleContext): Promise<SampleAnswer> {
  const weighings = await currentWeighings(sample.id)
  const names = await userNames([
    sample.weighedById,
    ...weighings.flatMap(({ corrections }) => corrections.map(({ correctedById }) => correctedById)),
  ])
  return {
    ...presentSampleItem(sample),
    // While a sample is open its own columns are empty; the capsules are counted as they lie there.
    n: sample.state === 'incomplete' ? weighings.length : sample.n,
    tareMeanMg: sample.tareMeanMg,
    tareSdMg: sample.tareSdMg,
    firstSegment: sample.firstSegment,
    balanceId: sample.balanceId,
    readabilityMg: balance?.readabilityMg ?? null,
    weighedBy: names.get(sample.weighedById) ?? '',
    verdictReasons: z.array(VerdictReason).parse(sample.verdictReasons ?? []),
    weighings: weighings.map((weighing) => presentWeighing(weighing, names)),
  }
}
