import type { BatchChart } from '#shared/schemas/batch-chart.ts'
import { formatCount, formatDifference, formatMg } from '@/format/number.ts'
import { formatClock, formatDuration } from '@/format/time.ts'

/** A stretch of the sentence that a page opens with; what matters is set strong. */
export interface Phrase {
  text: string
  tone?: 'strong' | 'alert'
}

const SHORT_OF_SAMPLES = 5

function interval([low, high]: readonly [number, number], decimals = 1): string {
  const [small, large] = [Math.abs(low), Math.abs(high)].toSorted((a, b) => a - b)
  return low * high > 0
    ? `${formatMg(small, decimals)} to ${formatMg(large, decimals)}`
    : `${formatDifference(low, decimals)} to ${formatDifference(high, decimals)}`
}

function driftPhrases({ drift, phases }: BatchChart, timeZone: string): Phrase[] {
  if (!drift) return []
  const startedAt = phases.at(-1)?.startedAt
  const since = startedAt && phases.length > 1 ? `Since ${formatClock(startedAt, timeZone)} (${drift.since}) the mean` : 'The mean'
  if (drift.limitMg === null) return [{ text: `${since} shows no drift that stands out from its scatter.` }]
  const way = drift.perHour < 0 ? 'falling' : 'climbing'
  const phrases: Phrase[] = [
    { text: `${since} has been ` },
    { text: `${way} by ${formatMg(Math.abs(drift.perHour))} mg an hour`, tone: 'alert' },
    { text: ` (${interval(drift.perHourInterval)})` },
  ]
  if (drift.perThousand !== null) phrases.push({ text: `, ${formatMg(Math.abs(drift.perThousand), 3)} mg a thousand capsules` })
  if (drift.minutesToLimit !== null && drift.minutesToLimit < 24 * 60) {
    phrases.push(
      { text: '. It will reach the alert limit in about ' },
      { text: formatDuration(drift.minutesToLimit), tone: 'strong' },
      { text: `, ${formatCount(drift.capsulesToLimit)} capsules` },
    )
  }
  return [...phrases, { text: '.' }]
}

function changePhrases({ change }: BatchChart): Phrase[] {
  if (!change) return []
  const isClear = change.intervalMg[0] * change.intervalMg[1] > 0
  const figure = `${formatDifference(change.differenceMg, 1)} mg (${formatDifference(change.intervalMg[0], 1)} to ${formatDifference(change.intervalMg[1], 1)})`
  return [
    { text: ` The last change (${change.label}) ${isClear ? 'moved the mean by' : 'made no clear difference to the mean:'} ` },
    { text: figure, ...(isClear ? { tone: 'strong' as const } : {}) },
    { text: '.' },
  ]
}

/** What is the case, in words with figures and their uncertainty; when nothing is wrong, one quiet line. */
export function chartSentence(chart: BatchChart, timeZone: string): Phrase[] {
  const { samples, targetMg } = chart
  const last = samples.at(-1)
  if (!last) return [{ text: 'No sample is weighed yet.' }]
  if (samples.length < SHORT_OF_SAMPLES) {
    return [
      {
        text: `${samples.length} sample${samples.length === 1 ? '' : 's'} so far; the last mean is ${formatMg(last.meanMg)} mg against a target of ${formatMg(targetMg)} mg.`,
      },
    ]
  }
  const drift = driftPhrases(chart, timeZone)
  const change = changePhrases(chart)
  if (drift.length + change.length > 0) return [...drift, ...change]
  return [
    {
      text: `${samples.length} samples; the last mean is ${formatMg(last.meanMg)} mg, ${formatDifference(last.meanMg - targetMg, 1)} mg from target.`,
    },
  ]
}

/** The chart in one sentence, for those who do not see it. */
export function chartSummary(chart: BatchChart): string {
  const { batch, samples, signals, targetMg, phases } = chart
  const means = samples.map(({ meanMg }) => meanMg)
  const mean = means.reduce((sum, value) => sum + value, 0) / Math.max(1, means.length)
  return `Control chart of batch ${batch.number}: ${samples.length} samples, mean of means ${formatMg(mean)} mg, target ${formatMg(targetMg)} mg, ${phases.length} phase${phases.length === 1 ? '' : 's'}, ${signals.length} signal${signals.length === 1 ? '' : 's'}.`
}
