import type { BalanceFileSplit } from '#shared/schemas/balance-files.ts'
import type { ProblemPlace } from './problems.ts'
import type { WeighingRow } from './row.ts'

/** Gives each row its sample: by the sample column, by pauses in time, or one for the whole file. */
export class SampleSplitter {
  /** Samples seen so far. */
  count = 0
  private readonly seen = new Set<string>()
  private last: WeighingRow | undefined
  private rowsInSample = 0

  constructor(
    private readonly split: BalanceFileSplit,
    private readonly maxRowsPerSample: number,
  ) {}

  /** Sets the row's sample index; returns what is wrong with its place in the file. */
  place(row: WeighingRow): Omit<ProblemPlace, 'column' | 'line'> | undefined {
    const previous = this.last
    this.last = row
    const problem = previous && this.split.by === 'time-gap' ? backwards(previous, row) : undefined
    if (!previous || this.startsSample(previous, row)) {
      this.count++
      this.rowsInSample = 0
      if (this.isRepeated(row)) return { code: 'split-sample', found: row.sample ?? '', expected: 'the rows of one sample together' }
    }
    row.sampleIndex = this.count - 1
    this.rowsInSample++
    if (this.rowsInSample === this.maxRowsPerSample + 1) {
      return {
        code: 'large-sample',
        found: `${this.rowsInSample} capsules or more`,
        expected: `at most ${this.maxRowsPerSample} capsules in one sample`,
      }
    }
    return problem
  }

  private startsSample(previous: WeighingRow, row: WeighingRow): boolean {
    if (this.split.by === 'whole-file') return false
    if (this.split.by === 'sample-column') return previous.sample !== row.sample
    const gapMs = (row.weighedAt?.getTime() ?? 0) - (previous.weighedAt?.getTime() ?? 0)
    return gapMs > this.split.minutes * 60_000
  }

  private isRepeated(row: WeighingRow): boolean {
    if (this.split.by !== 'sample-column' || row.sample === null) return false
    if (this.seen.has(row.sample)) return true
    this.seen.add(row.sample)
    return false
  }
}

function backwards(previous: WeighingRow, row: WeighingRow): Omit<ProblemPlace, 'column' | 'line'> | undefined {
  if (!previous.weighedAt || !row.weighedAt || row.weighedAt >= previous.weighedAt) return undefined
  return { code: 'backward-time', found: row.weighedAt.toISOString(), expected: `a time not before ${previous.weighedAt.toISOString()}` }
}
