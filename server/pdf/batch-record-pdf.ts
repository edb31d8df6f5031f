import packageJson from '../../package.json' with { type: 'json' }
import type { CheckItem, DispositionAnswer } from '#shared/schemas/release.ts'
import type { BatchRecord } from '../services/release/batch-record.ts'
import { PrintedRecord } from './document.ts'

export interface RecordToPrint {
  record: BatchRecord
  checklist: readonly CheckItem[]
  dispositions: readonly DispositionAnswer[]
  contentHash: string
  chainHead: string
  timeZone: string
  isDemo: boolean
}

const mg = (value: number | null, decimals = 1): string => (value === null ? '–' : value.toFixed(decimals))

function printer(timeZone: string): (stamp: string | null) => string {
  const format = new Intl.DateTimeFormat('en-GB', { timeZone, dateStyle: 'medium', timeStyle: 'medium', hourCycle: 'h23' })
  return (stamp) => (stamp === null ? '–' : format.format(new Date(stamp)))
}

const CHECK_WORDS = { done: 'in order', missing: 'MISSING', exception: 'see' } as const
const BASES: Record<string, string> = { gross: 'gross', 'net-mean-tare': 'net by mean tare', 'net-individual': 'net by individual shell' }

function identity(page: PrintedRecord, { record: { batch, balances }, timeZone }: RecordToPrint): void {
  const at = printer(timeZone)
  page.facts([
    ['Product', `${batch.product.code} ${batch.product.name}, capsule size ${batch.product.capsuleSize}`],
    [
      'Target and specification',
      `${mg(batch.product.targetFillMg)} mg; ${mg(batch.product.lowerSpecificationMg)} to ${mg(batch.product.upperSpecificationMg)} mg fill`,
    ],
    [
      'Machine and tooling',
      `${batch.machine.code} ${batch.machine.name}, tooling set ${batch.toolingSet.code}, ${batch.indexesPerMinute} indexes/min`,
    ],
    [
      'Shell lot',
      `${batch.shellLot.code}, tare ${mg(batch.shellLot.tareMeanMg, 2)} mg, SD ${mg(batch.shellLot.tareSdMg, 2)} mg, n ${batch.shellLot.tareN}`,
    ],
    ['Blend lot', batch.blendLot],
    [
      'Control plan',
      `version ${batch.controlPlan.planVersion}: ${batch.controlPlan.sampleSize} capsules every ${batch.controlPlan.intervalMinutes} min, ${BASES[batch.controlPlan.basis] ?? batch.controlPlan.basis}; mean alert ±${batch.controlPlan.meanAlertPercent} %, action ±${batch.controlPlan.meanActionPercent} %`,
    ],
    [
      'Balances',
      balances
        .map(({ code, readabilityMg, calibrationDueOn }) => `${code} (d ${readabilityMg} mg, calibration until ${calibrationDueOn})`)
        .join('; ') || '–',
    ],
    ['Run', `${at(batch.startedAt)} to ${at(batch.endedAt)}`],
    ['Start-up approved', `${at(batch.startUpApprovedAt)} by ${batch.startUpApprovedBy ?? '–'}`],
    ['Assay', batch.assayPercent === null ? '–' : `${batch.assayPercent} % of claim`],
    [
      'Yield',
      `${batch.goodCapsules ?? '–'} good, ${batch.rejectedCapsules ?? '–'} rejected, ${batch.setUpScrapCapsules ?? '–'} set-up scrap of ${batch.plannedCapsules} planned`,
    ],
  ])
}

function acceptance(page: PrintedRecord, { record }: RecordToPrint): void {
  page.heading('Acceptance')
  page.sentence('A statistical verdict by the rules named below. It is not a regulatory approval.', true)
  for (const result of record.acceptance) {
    page.sentence(
      `${result.standard}: ${result.verdict.replaceAll('-', ' ')}${result.basis === 'indicative' ? ' (indicative)' : ''}. ${result.headline}`,
    )
    for (const line of [...result.arithmetic, ...result.reasons]) page.sentence(line, true)
    if (result.edition !== '') page.sentence(`By ${result.edition}.`, true)
  }
}

function samples(page: PrintedRecord, { record, timeZone }: RecordToPrint): void {
  const at = printer(timeZone)
  page.heading('Samples')
  page.table(
    [
      { header: 'No.', share: 0.5, isFigure: true },
      { header: 'Kind', share: 1.2 },
      { header: 'Weighed', share: 1.9 },
      { header: 'By', share: 1.2 },
      { header: 'Basis', share: 1.2 },
      { header: 'n', share: 0.5, isFigure: true },
      { header: 'Mean mg', share: 0.9, isFigure: true },
      { header: 'SD mg', share: 0.8, isFigure: true },
      { header: 'Range mg', share: 0.9, isFigure: true },
      { header: 'Verdict', share: 1 },
    ],
    record.samples.map((sample) => [
      String(sample.sequence),
      sample.kind,
      at(sample.startedAt),
      sample.weighedBy,
      BASES[sample.basis] ?? sample.basis,
      String(sample.n),
      mg(sample.meanMg),
      mg(sample.sdMg),
      mg(sample.rangeMg),
      sample.state === 'abandoned' ? `abandoned: ${sample.abandonedReason ?? ''}` : (sample.verdict ?? sample.state),
    ]),
  )
}

function weights(page: PrintedRecord, { record }: RecordToPrint): void {
  page.heading('Every capsule')
  page.sentence('Weights in mg in the order of weighing, on the basis of the sample; * corrected, ? confirmed when asked.', true)
  for (const { sequence, basis, weighings } of record.samples) {
    const values = weighings.map(
      ({ netMg, grossMg, corrections, isQuestioned }) =>
        `${mg(basis === 'gross' ? grossMg : netMg)}${corrections.length > 0 ? '*' : ''}${isQuestioned ? '?' : ''}`,
    )
    page.sentence(`${sequence} (${BASES[basis] ?? basis}): ${values.join('  ')}`)
    for (const { ordinal, corrections } of weighings) {
      for (const { was, netMg, grossMg, reason, correctedBy } of corrections) {
        page.sentence(
          `   capsule ${ordinal}: ${mg(was.grossMg ?? was.netMg)} corrected to ${mg(grossMg ?? netMg)} by ${correctedBy}: ${reason}`,
          true,
        )
      }
    }
  }
}

function happenings(page: PrintedRecord, { record, timeZone }: RecordToPrint): void {
  const at = printer(timeZone)
  page.heading('Events and adjustments')
  page.table(
    [
      { header: 'When', share: 1.6 },
      { header: 'What', share: 1.2 },
      { header: 'From', share: 0.7, isFigure: true },
      { header: 'To', share: 0.7, isFigure: true },
      { header: 'Why', share: 3 },
      { header: 'By', share: 1.2 },
    ],
    record.events.map(({ happenedAt, kind, station, valueFrom, valueTo, unit, reason, label, recordedBy }) => [
      at(happenedAt),
      station === null ? kind : `${kind}, station ${station}`,
      valueFrom === null ? '' : String(valueFrom),
      valueTo === null ? '' : `${valueTo} ${unit ?? ''}`,
      reason || label,
      recordedBy,
    ]),
  )
  for (const change of record.changeovers) {
    page.sentence(
      `Tooling change ${change.fromToolingSet?.code ?? '–'} to ${change.toToolingSet.code}, ${at(change.startedAt)} to ${at(change.finishedAt)}, done by ${change.doneBy}, checked by ${change.checkedBy ?? '–'}.`,
    )
  }
  page.heading('Signals')
  if (record.signals.length === 0) page.sentence('None.')
  for (const signal of record.signals) {
    page.sentence(`${at(signal.raisedAt)}, sample ${signal.sampleSequence}, ${signal.severity}: ${signal.sentence}`)
    page.sentence(
      `Acknowledged ${at(signal.acknowledgedAt)} by ${signal.acknowledgedBy ?? '–'}. Cause: ${signal.cause ?? '–'}. Done: ${signal.reaction ?? '–'}. Closed by ${signal.closedBy ?? '–'}.`,
      true,
    )
  }
  page.heading('Deviations')
  if (record.deviations.length === 0) page.sentence('None.')
  for (const { number, title, state, description, cause, effectOnQuality, correction, materialOutcome } of record.deviations) {
    page.sentence(`${number} ${title} (${state}). ${description}`)
    page.sentence(
      `Cause: ${cause ?? '–'}. Effect on quality: ${effectOnQuality ?? '–'}. Correction: ${correction ?? '–'}. Material: ${materialOutcome ?? '–'}.`,
      true,
    )
  }
}

/** The weight-check part of a batch record as a PDF: what was made, weighed, signalled, decided, by whom, with its hashes. */
export async function printBatchRecord(input: RecordToPrint): Promise<Buffer> {
  const { record, checklist, dispositions, contentHash, chainHead, timeZone, isDemo } = input
  const at = printer(timeZone)
  const page = new PrintedRecord(`Batch ${record.batch.number}: fill weights`)
  if (isDemo) page.sentence('DEMO: invented data of an invented site. This is not a record.')
  page.sentence(`Times in ${timeZone}.`, true)
  identity(page, input)
  page.heading('Decision')
  if (dispositions.length === 0) page.sentence('No decision has been signed.')
  for (const { decidedAt, decidedBy, meaning, reason, contentHash: signed } of dispositions) {
    page.sentence(`${meaning} by ${decidedBy} on ${at(decidedAt)}. ${reason}`)
    page.sentence(`Electronic signature over the record with SHA-256 ${signed}.`, true)
  }
  page.heading('Review')
  page.table(
    [
      { header: 'What', share: 1.4 },
      { header: 'State', share: 0.7 },
      { header: 'Finding', share: 4 },
    ],
    checklist.map(({ name, state, sentence }) => [name, CHECK_WORDS[state], sentence]),
  )
  acceptance(page, input)
  samples(page, input)
  happenings(page, input)
  weights(page, input)
  page.heading('Identity of this record')
  page.facts([
    ['Content SHA-256', contentHash],
    ['Head of the audit chain', chainHead],
    ['Program', `Scruple ${packageJson.version}`],
  ])
  return page.finish(`Batch ${record.batch.number}   Scruple ${packageJson.version}   content ${contentHash.slice(0, 16)}…`)
}
