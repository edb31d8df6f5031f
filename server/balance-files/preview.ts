import {
  BalanceFileMapping,
  type BalanceFileNote,
  type BalanceFilePreview,
  type BalanceFileProblem,
  type BalanceFileRole,
} from '#shared/schemas/balance-files.ts'
import { FilePieces, tooLarge } from './bytes.ts'
import { headerUnit } from './columns.ts'
import { TextReader, detectEncoding, type Encoding } from './encoding.ts'
import { guessRoles, guessStableWords } from './guess-columns.ts'
import { BalanceFileProblems, Findings, UnreadableError, WHOLE_FILE, quote } from './problems.ts'
import { DEFAULT_MAX_BYTES, readWholeBalanceFile, type ReadOptions } from './read.ts'
import { lineBlocks, type LineBlock } from './records.ts'
import { sniffForm, type FileForm } from './sniff.ts'
import { TimeColumn } from './time.ts'
import { readShownWeight, readUnit, type WeightUnit } from './weight.ts'

export interface PreviewOptions extends ReadOptions {
  /** The mapping kept for this balance; without it one is guessed. */
  mapping?: BalanceFileMapping | undefined
  /** Zone of times that name none. */
  timeZone?: string
}

const HEAD_BYTES = 131_072
const ROWS_SHOWN = 20

interface Outcome {
  problems: BalanceFileProblem[]
  notes: BalanceFileNote[]
}

/**
 * Shows the first rows of a balance file as read, what they seem to mean, what a person must still say, and the
 * problems that the first 128 kB hold under the mapping. Takes nothing: the file is read for good by `readBalanceFile`.
 * It never throws for what a file holds; an unreadable file is a preview with a problem.
 */
export async function previewBalanceFile(bytes: Uint8Array, options: PreviewOptions): Promise<BalanceFilePreview> {
  const maxBytes = options.maxBytes ?? DEFAULT_MAX_BYTES
  try {
    if (bytes.byteLength > maxBytes) throw tooLarge(bytes.byteLength, maxBytes)
    const head = headOf(bytes)
    const text = new TextReader()
    const blocks: LineBlock[] = []
    for await (const block of lineBlocks(text.read(new FilePieces(head, maxBytes).read()))) blocks.push(block)
    const form = sniffForm(blocks)
    const encoding = text.encoding ?? 'utf-8'
    if (!form) throw nothingFound(bytes)
    return await previewForm(head, { form, encoding, options })
  } catch (error) {
    if (!(error instanceof UnreadableError)) throw error
    const findings = new Findings()
    findings.problem(error.place)
    return {
      encoding: 'unknown',
      columns: [],
      preamble: [],
      rows: [],
      mapping: null,
      guess: null,
      questions: [],
      problems: findings.problems,
      notes: [],
    }
  }
}

async function previewForm(
  head: Uint8Array,
  known: { form: FileForm; encoding: Encoding; options: PreviewOptions },
): Promise<BalanceFilePreview> {
  const { form, encoding, options } = known
  const header = form.header === null ? null : (form.records[form.header]?.cells.map((cell) => cell.trim()) ?? null)
  const data = form.records.slice(form.firstData)
  const guess = guessMapping(form, header, options)
  const mapping = options.mapping ?? guess.mapping
  const outcome: Outcome = mapping ? await tryMapping(head, mapping, options) : { problems: [], notes: [] }
  const shown = data.slice(0, ROWS_SHOWN)
  return {
    encoding,
    columns: guess.roles.map((role, place) => ({
      place: place + 1,
      name: header?.[place] ?? '',
      role,
      examples: shown.slice(0, 3).map(({ cells }) => quote(cells[place] ?? '')),
    })),
    preamble: form.records.slice(0, form.header ?? form.firstData).map(({ cells }) => quote(cells.join(form.delimiter))),
    rows: shown.map(({ line, cells }) => ({ line, cells: cells.map(quote) })),
    mapping,
    guess: { ...guess.form },
    questions: options.mapping ? [] : guess.questions,
    ...outcome,
  }
}

function guessMapping(form: FileForm, header: string[] | null, options: PreviewOptions) {
  const rows = form.records.slice(form.firstData).map(({ cells }) => cells)
  const roles = guessRoles(header, rows, form.decimal)
  const cellsOf = (role: BalanceFileRole): string[] => rows.map((cells) => (cells[roles.indexOf(role)] ?? '').trim())
  const weights = cellsOf('weight')
  const unit = guessUnit(header?.[roles.indexOf('weight')], weights, form.decimal)
  const stableWords = roles.includes('status') ? guessStableWords(cellsOf('status')) : []
  const times = roles.includes('date') ? cellsOf('date').map((date, row) => `${date} ${cellsOf('time')[row] ?? ''}`) : cellsOf('time')
  const timeFormats = roles.includes('time') ? fittingTimeFormats(times.slice(0, ROWS_SHOWN), options) : []
  const headerRow = form.header === null ? null : (form.records[form.header]?.line ?? null)
  const columns = Object.fromEntries(roles.flatMap((role, place) => (role === null ? [] : [[role, header?.[place] || place + 1]])))
  const mapping = BalanceFileMapping.safeParse({
    delimiter: form.delimiter,
    decimal: form.decimal,
    headerRow,
    firstDataRow: form.records[form.firstData]?.line ?? 1,
    columns,
    unit,
    timeFormat: timeFormats[0] ?? 'year-first',
    timeZone: options.timeZone ?? 'UTC',
    stableWords,
    split: roles.includes('sample')
      ? { by: 'sample-column' }
      : roles.includes('time')
        ? { by: 'time-gap', minutes: 5 }
        : { by: 'whole-file' },
  })
  const questions = openQuestions({ roles, hasUnits: unit !== null || namesUnits(weights, form.decimal), stableWords, timeFormats })
  return {
    roles,
    questions,
    mapping: mapping.success ? mapping.data : null,
    form: { delimiter: form.delimiter, decimal: form.decimal, headerRow, unit, stableWords },
  }
}

/** What only a person can say about this file. */
function openQuestions(guess: {
  roles: readonly (BalanceFileRole | null)[]
  hasUnits: boolean
  stableWords: readonly string[]
  timeFormats: readonly string[]
}): string[] {
  const { roles, hasUnits, stableWords, timeFormats } = guess
  const questions: string[] = []
  if (!roles.includes('weight')) questions.push('Which column holds the weight?')
  if (!hasUnits && !roles.includes('unit')) questions.push('Are the weights in g or in mg? Nothing in the file says so.')
  if (roles.includes('status') && stableWords.length === 0) questions.push('Which words in the status column mean a stable reading?')
  if (timeFormats.length > 1) questions.push('Is the day or the month written first? Both fit.')
  return questions
}

/** The unit that the header or every weight itself states; null where nothing does. */
function guessUnit(header: string | undefined, weights: readonly string[], decimal: '.' | ','): WeightUnit | null {
  const named = headerUnit(header ?? '')
  if (named !== undefined) return readUnit(named) ?? null
  const units = new Set(
    weights.map((cell) => readShownWeight(cell, decimal)).flatMap((reading) => ('code' in reading ? [] : [reading.unit])),
  )
  const [only] = units
  return units.size === 1 && only ? only : null
}

/** Whether every weight that can be read names its own unit. */
function namesUnits(weights: readonly string[], decimal: '.' | ','): boolean {
  const readings = weights.map((cell) => readShownWeight(cell, decimal)).flatMap((reading) => ('code' in reading ? [] : [reading]))
  return readings.length > 0 && readings.every(({ unit }) => unit !== null)
}

/** The orders of day, month and year that read every text that is a time at all; lines of statistics hold none. */
function fittingTimeFormats(times: readonly string[], options: PreviewOptions): BalanceFileMapping['timeFormat'][] {
  const formats = ['year-first', 'day-first', 'month-first'] as const
  const reads = (format: BalanceFileMapping['timeFormat'], text: string): boolean =>
    new TimeColumn(format, options.timeZone ?? 'UTC', options.now).read(text).ok
  const readable = times.filter((text) => formats.some((format) => reads(format, text)))
  return readable.length === 0 ? [] : formats.filter((format) => readable.every((text) => reads(format, text)))
}

async function tryMapping(head: Uint8Array, mapping: BalanceFileMapping, options: PreviewOptions): Promise<Outcome> {
  try {
    const { report } = await readWholeBalanceFile(head, mapping, options)
    return { problems: [], notes: report.notes }
  } catch (error) {
    if (!(error instanceof BalanceFileProblems)) throw error
    return { problems: [...error.problems], notes: [...error.notes] }
  }
}

/** The first 128 kB, cut at a line end so that no half line is judged. */
function headOf(bytes: Uint8Array): Uint8Array {
  if (bytes.byteLength <= HEAD_BYTES) return bytes
  const head = bytes.subarray(0, HEAD_BYTES)
  const encoding = detectEncoding(head)
  if (encoding === 'utf-16le' || encoding === 'utf-16be') {
    const high = encoding === 'utf-16le' ? 1 : 0
    for (let at = HEAD_BYTES - 2; at > 0; at -= 2)
      if (head[at + high] === 0 && head[at + 1 - high] === 0x0a) return head.subarray(0, at + 2)
    return head
  }
  const end = Math.max(head.lastIndexOf(0x0a), head.lastIndexOf(0x0d))
  return end < 0 ? head : head.subarray(0, end + 1)
}

function nothingFound(bytes: Uint8Array): UnreadableError {
  const isEmpty = bytes.byteLength === 0
  return new UnreadableError({
    code: isEmpty ? 'empty-file' : 'no-weights',
    line: 1,
    column: WHOLE_FILE,
    found: isEmpty ? 'an empty file' : 'no line with a number',
    expected: 'lines of weights',
  })
}
