import type { BalanceFileMapping, BalanceFileNote } from '#shared/schemas/balance-files.ts'
import { FilePieces } from './bytes.ts'
import { TextReader, type Encoding } from './encoding.ts'
import { FileRows } from './file-rows.ts'
import { Findings, UnreadableError, WHOLE_FILE } from './problems.ts'
import { lineBlocks } from './records.ts'
import type { RowLimits, WeighingRow } from './row.ts'

export const DEFAULT_MAX_BYTES = 100_000_000
export const DEFAULT_MAX_ROWS = 1_000_000
export const DEFAULT_MAX_ROWS_PER_SAMPLE = 1000
const BATCH_ROWS = 10_000

export interface ReadOptions extends RowLimits {
  maxBytes?: number
  maxRows?: number
  maxRowsPerSample?: number
}

/** What was read, once all of it was found good. */
export interface BalanceFileReport {
  encoding: Encoding
  bytes: number
  /** Of the original bytes, in hexadecimal. */
  sha256: string
  rows: number
  samples: number
  notes: BalanceFileNote[]
  noteTotal: number
}

/**
 * Reads a balance file of any size by its mapping, in batches of at most 10,000 weighings and with flat memory.
 *
 * All or nothing: batches are provisional until the generator ends and returns its report. At the first problem no
 * further batch comes; the rest is still read so that one refusal lists what is wrong (up to 200 problems, with
 * the total). A problem that makes the rest unreadable (an open quote, a NUL byte) ends the reading at once.
 * The same bytes and mapping give the same rows, however the bytes arrive.
 * @throws {BalanceFileProblems} where anything in the file is not as it must be; an error of the source as it is
 */
export async function* readBalanceFile(
  source: AsyncIterable<Uint8Array> | Uint8Array,
  mapping: BalanceFileMapping,
  options: ReadOptions,
): AsyncGenerator<WeighingRow[], BalanceFileReport> {
  const findings = new Findings()
  const pieces = new FilePieces(source, options.maxBytes ?? DEFAULT_MAX_BYTES)
  const text = new TextReader()
  const limits = {
    ...options,
    maxRows: options.maxRows ?? DEFAULT_MAX_ROWS,
    maxRowsPerSample: options.maxRowsPerSample ?? DEFAULT_MAX_ROWS_PER_SAMPLE,
  }
  const rows = new FileRows(mapping, limits, findings)
  try {
    for await (const block of lineBlocks(text.read(pieces.read()))) {
      rows.take(block)
      while (findings.problemTotal === 0 && rows.pending.length >= BATCH_ROWS) yield rows.pending.splice(0, BATCH_ROWS)
      if (findings.problemTotal > 0) rows.pending.length = 0
    }
    refuseEmpty(pieces.bytes, rows, findings)
  } catch (error) {
    if (!(error instanceof UnreadableError)) throw error
    findings.problem(error.place)
  }
  if (findings.problemTotal > 0) throw findings.refuse()
  if (rows.pending.length > 0) yield rows.pending
  return {
    encoding: text.encoding ?? 'utf-8',
    bytes: pieces.bytes,
    sha256: pieces.sha256(),
    rows: rows.count,
    samples: rows.sampleCount,
    notes: findings.notes,
    noteTotal: findings.noteTotal,
  }
}

/** Reads a whole file into memory: for small files and tests. Same refusals as {@link readBalanceFile}. */
export async function readWholeBalanceFile(
  source: AsyncIterable<Uint8Array> | Uint8Array,
  mapping: BalanceFileMapping,
  options: ReadOptions,
): Promise<{ rows: WeighingRow[]; report: BalanceFileReport }> {
  const rows: WeighingRow[] = []
  const reading = readBalanceFile(source, mapping, options)
  for (;;) {
    const step = await reading.next()
    if (step.done === true) return { rows, report: step.value }
    for (const row of step.value) rows.push(row)
  }
}

function refuseEmpty(bytes: number, rows: FileRows, findings: Findings): void {
  if (findings.problemTotal > 0 || rows.count > 0) return
  const code = bytes === 0 ? 'empty-file' : 'no-weights'
  const found = bytes === 0 ? 'an empty file' : 'no line with a weight'
  throw new UnreadableError({ code, line: 1, column: WHOLE_FILE, found, expected: 'at least one weight' })
}
