import type { CheckItem } from '#shared/schemas/release.ts'
import type { BatchRecord } from './batch-record.ts'

const plural = (count: number, word: string): string => `${count} ${word}${count === 1 ? '' : 's'}`

/** One line of the checklist: done when nothing is found, missing or an exception otherwise. */
function item(name: string, found: number, sentences: { none: string; some: string }, { blocks }: { blocks: boolean }): CheckItem {
  const state = found === 0 ? 'done' : blocks ? 'missing' : 'exception'
  return { name, state, sentence: found === 0 ? sentences.none : sentences.some, blocks: blocks && found > 0 }
}

/** Samples that came later after the one before than the plan's interval and half of it again. */
function gaps({ batch, samples }: BatchRecord): number {
  const intervalMs = batch.controlPlan.intervalMinutes * 60_000
  const times = samples
    .filter(({ state, kind }) => state === 'complete' && kind !== 'start-up')
    .map(({ startedAt }) => Date.parse(startedAt))
    .toSorted((a, b) => a - b)
  return times.slice(1).filter((time, place) => time - (times[place] ?? time) > 1.5 * intervalMs).length
}

/**
 * What the quality unit looks at before release, by exception: what is missing and blocks, what was not normal and has to
 * be seen, and what is in order (trade practice; 21 CFR 211.192 is the legal base of the review).
 */
export function releaseChecklist(record: BatchRecord): CheckItem[] {
  const { batch, samples, signals, deviations, changeovers, acceptance } = record
  const complete = samples.filter(({ state }) => state === 'complete')
  const incomplete = samples.filter(({ state }) => state === 'incomplete').length
  const abandoned = samples.filter(({ state }) => state === 'abandoned').length
  const corrections = samples.reduce((sum, { weighings }) => sum + weighings.filter(({ corrections: own }) => own.length > 0).length, 0)
  const openSignals = signals.filter(({ state }) => state !== 'closed')
  const openDeviations = deviations.filter(({ state }) => state === 'open').length
  const unchecked = changeovers.filter(({ state }) => state !== 'checked').length
  const failed = acceptance.filter(({ verdict }) => verdict === 'fail')
  const undecided = acceptance.filter(({ verdict }) => verdict !== 'pass' && verdict !== 'fail')
  const indicative = acceptance.filter(({ basis }) => basis === 'indicative').length
  const made = (batch.goodCapsules ?? 0) + (batch.rejectedCapsules ?? 0) + (batch.setUpScrapCapsules ?? 0)
  const yieldPercent = (100 * (batch.goodCapsules ?? 0)) / batch.plannedCapsules
  return [
    item(
      'Run ended',
      batch.endedAt === null ? 1 : 0,
      {
        none: `The run is ended; ${made.toLocaleString('en')} capsules are accounted for, yield ${yieldPercent.toFixed(1)} %.`,
        some: 'The run is not ended yet.',
      },
      { blocks: true },
    ),
    item(
      'Start-up approved',
      batch.startUpApprovedAt === null ? 1 : 0,
      { none: `The start-up was approved by ${batch.startUpApprovedBy ?? ''}.`, some: 'The start-up was never approved.' },
      { blocks: true },
    ),
    item(
      'Samples complete',
      incomplete,
      { none: `${plural(complete.length, 'sample')} complete.`, some: `${plural(incomplete, 'sample')} unfinished.` },
      { blocks: true },
    ),
    item(
      'Samples in time',
      gaps(record),
      {
        none: 'Every sample followed the one before within the interval.',
        some: `${plural(gaps(record), 'sample')} came more than half an interval late.`,
      },
      { blocks: false },
    ),
    item(
      'Abandoned samples',
      abandoned,
      { none: 'None was abandoned.', some: `${plural(abandoned, 'sample')} abandoned: read the reason.` },
      { blocks: false },
    ),
    item(
      'Signals answered',
      openSignals.length,
      {
        none: `${plural(signals.length, 'signal')}, all closed with a cause.`,
        some: `${plural(openSignals.length, 'signal')} without a recorded cause and reaction.`,
      },
      { blocks: openSignals.some(({ severity }) => severity === 'action') },
    ),
    item(
      'Deviations closed',
      openDeviations,
      {
        none: deviations.length === 0 ? 'No deviation was opened.' : `${plural(deviations.length, 'deviation')}, all closed.`,
        some: `${plural(openDeviations, 'deviation')} open.`,
      },
      { blocks: true },
    ),
    item(
      'Changeovers checked',
      unchecked,
      {
        none: changeovers.length === 0 ? 'No tooling was changed in this run.' : 'Each was checked by a second person.',
        some: `${plural(unchecked, 'changeover')} without a second person’s check.`,
      },
      { blocks: true },
    ),
    item(
      'Corrections',
      corrections,
      { none: 'No weight was corrected.', some: `${plural(corrections, 'weight')} corrected: see old, new and reason.` },
      { blocks: false },
    ),
    item(
      'Acceptance worked out',
      undecided.length,
      {
        none: 'Every standard of the product has a verdict.',
        some: undecided.map(({ standard, headline }) => `${standard}: ${headline}`).join(' '),
      },
      { blocks: true },
    ),
    item(
      'Acceptance passed',
      failed.length,
      {
        none: indicative > 0 ? 'Passed; indicative, since the shells were not weighed one by one.' : 'Passed.',
        some: `Failed: ${failed.map(({ standard }) => standard).join(', ')}. A failed batch cannot be released.`,
      },
      { blocks: true },
    ),
  ]
}
