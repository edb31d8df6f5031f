import { Sample } from '../../models/sample.ts'
import { Weighing } from '../../models/weighing.ts'
import { WeighingCorrection } from '../../models/weighing-correction.ts'
import { userNames } from '../user-names.ts'

/** A sample as the batch record holds it: every capsule with its basis, and every later version with its reason. */
export type RecordedSample = Awaited<ReturnType<typeof recordedSamples>>[number]

/** All samples of a batch with their capsules, in order; two reads for however many samples. */
export async function recordedSamples(batchId: string) {
  const samples = await Sample.findAll({ where: { batchId }, order: [['sequence', 'ASC']] })
  const ids = samples.map(({ id }) => id)
  const weighings = await Weighing.findAll({
    where: { sampleId: ids },
    order: [
      ['sampleId', 'ASC'],
      ['ordinal', 'ASC'],
    ],
  })
  const corrections = await WeighingCorrection.findAll({ where: { sampleId: ids }, order: [['version', 'ASC']] })
  const names = await userNames([
    ...samples.map(({ weighedById }) => weighedById),
    ...corrections.map(({ correctedById }) => correctedById),
  ])
  const bySample = new Map<string, Weighing[]>()
  for (const weighing of weighings) bySample.set(weighing.sampleId, [...(bySample.get(weighing.sampleId) ?? []), weighing])
  return samples.map((sample) => ({
    id: sample.id,
    sequence: sample.sequence,
    kind: sample.kind,
    basis: sample.basis,
    state: sample.state,
    n: sample.n,
    meanMg: sample.meanMg,
    sdMg: sample.sdMg,
    rangeMg: sample.rangeMg,
    tareMeanMg: sample.tareMeanMg,
    tareSdMg: sample.tareSdMg,
    dueAt: sample.dueAt?.toISOString() ?? null,
    startedAt: sample.startedAt.toISOString(),
    completedAt: sample.completedAt?.toISOString() ?? null,
    weighedBy: names.get(sample.weighedById) ?? '',
    entry: sample.entry,
    verdict: sample.verdict,
    isLate: sample.isLate,
    abandonedReason: sample.abandonedReason,
    excludedReason: sample.excludedReason,
    weighings: (bySample.get(sample.id) ?? []).map((first) => {
      const own = corrections.filter(({ sampleId, ordinal }) => sampleId === sample.id && ordinal === first.ordinal)
      const { grossMg, shellMg, netMg, position } = own.at(-1) ?? first
      return {
        ...{ ordinal: first.ordinal, position, segment: first.segment, grossMg, shellMg, netMg, isQuestioned: first.isQuestioned },
        weighedAt: first.weighedAt.toISOString(),
        corrections: own.map(({ version, grossMg: gross, netMg: net, reason, correctedById, correctedAt }) => ({
          ...{ version, grossMg: gross, netMg: net, reason },
          was: { grossMg: first.grossMg, netMg: first.netMg },
          correctedBy: names.get(correctedById) ?? '',
          correctedAt: correctedAt.toISOString(),
        })),
      }
    }),
  }))
}
