import { z } from 'zod'

/** A column of a file: its name in the header line, or its place counted from 1. */
export const BalanceFileColumn = z
  .union([z.string().trim().min(1).max(120), z.int().min(1).max(200)])
  .meta({ id: 'BalanceFileColumn', description: 'A column by its name in the header line, or by its place counted from 1.' })
export type BalanceFileColumn = z.output<typeof BalanceFileColumn>

export const BALANCE_FILE_ROLES = ['weight', 'unit', 'position', 'segment', 'sample', 'time', 'date', 'status'] as const
export type BalanceFileRole = (typeof BALANCE_FILE_ROLES)[number]

/** First cells that mark a line of statistics and not a capsule. A single letter counts only before ":" or "=". */
export const SUMMARY_WORDS = [
  ...['mean', 'average', 'avg', 'median', 'sd', 'std', 'std dev', 'stdev', 'standard deviation', 'rsd', 'cv'],
  ...['min', 'minimum', 'max', 'maximum', 'range', 'sum', 'total', 'subtotal', 'count', 'n', 's'],
]

const TimeZone = z.string().refine(isTimeZone, { error: 'Expected the name of a time zone, such as Europe/Dublin or UTC.' })

function isTimeZone(name: string): boolean {
  try {
    new Intl.DateTimeFormat('en', { timeZone: name })
    return true
  } catch (error) {
    if (error instanceof RangeError) return false
    throw error
  }
}

export const BalanceFileSplit = z
  .discriminatedUnion('by', [
    z.strictObject({ by: z.literal('whole-file') }),
    z.strictObject({ by: z.literal('sample-column') }),
    z.strictObject({ by: z.literal('time-gap'), minutes: z.number().positive().max(1440) }),
  ])
  .meta({ id: 'BalanceFileSplit', description: 'How the rows of a file fall into samples.' })
export type BalanceFileSplit = z.output<typeof BalanceFileSplit>

/** How the files of one balance read, as a person confirmed it (requirement A22). Nothing in it is assumed while reading. */
export const BalanceFileMapping = z
  .strictObject({
    delimiter: z.enum([',', ';', '\t', '|']),
    decimal: z.enum(['.', ',']),
    headerRow: z.int().min(1).max(200).nullable().describe('Line of the column names, counted from 1; null where there are none.'),
    firstDataRow: z.int().min(1).max(201).optional().describe('First line that may hold a weight; by default the one after the header.'),
    columns: z.strictObject({
      weight: BalanceFileColumn,
      unit: BalanceFileColumn.optional(),
      position: BalanceFileColumn.optional(),
      segment: BalanceFileColumn.optional(),
      sample: BalanceFileColumn.optional(),
      time: BalanceFileColumn.optional(),
      date: BalanceFileColumn.optional(),
      status: BalanceFileColumn.optional(),
    }),
    unit: z.enum(['g', 'mg']).nullable().describe('Unit of a weight that names none itself; null where every row must name its own.'),
    timeFormat: z.enum(['year-first', 'day-first', 'month-first']).default('year-first'),
    timeZone: TimeZone.default('UTC').describe('Zone of times that name none.'),
    stableWords: z
      .array(z.string().trim().max(40))
      .max(20)
      .default([])
      .describe('What the status column shows for a stable reading; an empty text allows an empty cell.'),
    summaryWords: z
      .array(z.string().trim().min(1).max(40))
      .max(60)
      .default([...SUMMARY_WORDS]),
    split: BalanceFileSplit.default({ by: 'whole-file' }),
  })
  .superRefine(checkMapping)
  .meta({ id: 'BalanceFileMapping', description: 'How the files of a balance read: marks, header, columns, unit, times, samples.' })
export type BalanceFileMapping = z.output<typeof BalanceFileMapping>

interface MappingParts {
  delimiter: string
  decimal: string
  headerRow: number | null
  firstDataRow?: number | undefined
  columns: Partial<Record<BalanceFileRole, BalanceFileColumn | undefined>>
  unit: string | null
  stableWords: readonly string[]
  split: BalanceFileSplit
}

function checkMapping(mapping: MappingParts, context: z.RefinementCtx): void {
  const refuse = (path: (string | number)[], message: string): void => {
    context.addIssue({ code: 'custom', path, message })
  }
  const { columns, headerRow, split } = mapping
  if (mapping.delimiter === mapping.decimal) refuse(['decimal'], 'The decimal sign cannot be the delimiter too.')
  if (headerRow !== null && mapping.firstDataRow !== undefined && mapping.firstDataRow <= headerRow) {
    refuse(['firstDataRow'], 'The first data line must come after the header line.')
  }
  const places = Object.entries(columns).filter((entry): entry is [BalanceFileRole, BalanceFileColumn] => entry[1] !== undefined)
  for (const [role, column] of places) {
    if (headerRow === null && typeof column === 'string')
      refuse(['columns', role], 'Without a header line a column is named by its place, counted from 1.')
    const twin = places.find(([other, place]) => other !== role && place === column)
    if (twin) refuse(['columns', role], `This column is already used as ${twin[0]}.`)
  }
  if (columns.unit === undefined && mapping.unit === null && headerRow === null) {
    refuse(['unit'], 'Say whether the weights are in g or mg: neither a unit column nor a header line can tell.')
  }
  if (columns.date !== undefined && columns.time === undefined) refuse(['columns', 'date'], 'A date column needs a time column beside it.')
  if (columns.status !== undefined && mapping.stableWords.length === 0) {
    refuse(['stableWords'], 'Name at least one word by which the status column marks a stable reading.')
  }
  if (split.by === 'sample-column' && columns.sample === undefined)
    refuse(['columns', 'sample'], 'Splitting by sample needs the sample column.')
  if (split.by === 'time-gap' && columns.time === undefined)
    refuse(['columns', 'time'], 'Splitting by a pause in time needs the time column.')
}

export const BALANCE_FILE_PROBLEM_CODES = [
  ...['empty-file', 'no-weights', 'too-large', 'binary-file', 'mixed-encoding', 'control-character', 'long-line', 'open-quotes'],
  ...['no-header', 'duplicate-header', 'unknown-column', 'column-count', 'formula', 'not-a-number', 'not-a-weight', 'implausible-weight'],
  ...[
    'too-many-decimals',
    'unknown-unit',
    'unit-conflict',
    'unstable-reading',
    'unknown-position',
    'unknown-segment',
    'bad-time',
    'future-time',
  ],
  ...['backward-time', 'no-sample', 'split-sample', 'large-sample', 'too-many-rows'],
] as const
export type BalanceFileProblemCode = (typeof BALANCE_FILE_PROBLEM_CODES)[number]

/** One thing wrong with a file: where, what was found, what was expected. Line 1 and column "file" mean the file as a whole. */
export const BalanceFileProblem = z
  .object({
    code: z.enum(BALANCE_FILE_PROBLEM_CODES),
    line: z.int().min(1),
    column: z.string(),
    found: z.string(),
    expected: z.string(),
    message: z.string(),
  })
  .meta({ id: 'BalanceFileProblem', description: 'One thing wrong with a balance file: line, column, what was found, what was expected.' })
export type BalanceFileProblem = z.output<typeof BalanceFileProblem>

export const BalanceFileNote = z
  .object({ line: z.int().min(1), message: z.string() })
  .meta({ id: 'BalanceFileNote', description: 'Something in a balance file that was skipped or resolved, and how.' })
export type BalanceFileNote = z.output<typeof BalanceFileNote>

/** What the first lines of a file show, what they seem to mean, and what a person still has to say. */
export const BalanceFilePreview = z
  .object({
    encoding: z.string(),
    columns: z.array(
      z.object({ place: z.int().min(1), name: z.string(), role: z.enum(BALANCE_FILE_ROLES).nullable(), examples: z.array(z.string()) }),
    ),
    preamble: z.array(z.string()),
    rows: z.array(z.object({ line: z.int().min(1), cells: z.array(z.string()) })),
    mapping: BalanceFileMapping.nullable(),
    guess: z
      .object({
        delimiter: z.enum([',', ';', '\t', '|']),
        decimal: z.enum(['.', ',']),
        headerRow: z.int().min(1).nullable(),
        unit: z.enum(['g', 'mg']).nullable(),
        stableWords: z.array(z.string()),
      })
      .nullable(),
    questions: z.array(z.string()),
    problems: z.array(BalanceFileProblem),
    notes: z.array(BalanceFileNote),
  })
  .meta({ id: 'BalanceFilePreview', description: 'The first rows of a balance file as read, the guessed mapping and its problems.' })
export type BalanceFilePreview = z.output<typeof BalanceFilePreview>
