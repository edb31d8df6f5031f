import { verdictOf } from '#shared/trade/judge-sample.ts'
import type { SignalSource } from '#shared/vocabulary.ts'
import { Signal } from '../../models/signal.ts'
import { enqueueMail } from '../enqueue-mail.ts'
import { publishEvent } from '../live-events.ts'
import type { SampleContext } from '../samples/sample-context.ts'

function mailText({ batch, machine, product, sample }: SampleContext, sources: readonly SignalSource[]): string {
  return [
    `Batch ${batch.number} on machine ${machine.code}, ${product.code} ${product.name}.`,
    `Sample ${sample.sequence} is beyond an action limit:`,
    ...sources.map(({ sentence }) => `- ${sentence}`),
    '',
    'The reaction plan of the batch says what to do; this message only tells that it is needed.',
  ].join('\n')
}

/** One signal for one sample, listing all that it hit; an action signal is mailed to the engineers once. */
export async function raiseSignal(context: SampleContext, sources: SignalSource[]): Promise<void> {
  const { sample, batch, machine } = context
  const severity = verdictOf(sources) === 'action' ? 'action' : 'alert'
  const sentence = sources
    .map((source) => source.sentence)
    .join(' ')
    .slice(0, 1_000)
  const known = await Signal.findOne({ where: { sampleId: sample.id } })
  const wasAction = known?.severity === 'action'
  const signal =
    known ?? (await Signal.create({ batchId: batch.id, sampleId: sample.id, severity, sources, sentence, raisedAt: new Date() }))
  if (known) await known.update({ severity, sources, sentence, version: known.version + 1 })
  await publishEvent({ siteId: batch.siteId, kind: 'signal', subjectId: signal.id, batchId: batch.id })
  if (severity !== 'action' || wasAction) return
  await enqueueMail({
    siteId: batch.siteId,
    role: 'engineer',
    subject: `Action: batch ${batch.number} on ${machine.code}, sample ${sample.sequence}`,
    text: mailText(context, sources),
    signalId: signal.id,
  })
}
