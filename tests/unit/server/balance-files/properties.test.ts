import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import type { BalanceFileMapping } from '#shared/schemas/balance-files.ts'
import { PlainLines } from '#server/balance-files/plain.ts'
import { previewBalanceFile } from '#server/balance-files/preview.ts'
import { BalanceFileProblems, Findings } from '#server/balance-files/problems.ts'
import { layoutOf } from '#server/balance-files/columns.ts'
import { readBalanceFile, type ReadOptions } from '#server/balance-files/read.ts'
import { RowReader, type WeighingRow } from '#server/balance-files/row.ts'
import { NOW, bytesOf, mapping } from './files.ts'

/** 20,000 files in all: valid ones, valid ones with one thing broken, lines of nonsense, and plain bytes. */
const RUNS = { valid: 4000, broken: 6000, nonsense: 6000, bytes: 4000 }

type Outcome = { taken: WeighingRow[] } | { refused: BalanceFileProblems; rowsBefore: number }

async function read(source: Uint8Array, how: BalanceFileMapping, options: Partial<ReadOptions> = {}): Promise<Outcome> {
  const rows: WeighingRow[] = []
  try {
    for await (const batch of readBalanceFile(source, how, { now: NOW, ...options })) rows.push(...batch)
    return { taken: rows }
  } catch (error) {
    if (!(error instanceof BalanceFileProblems)) throw error
    return { refused: error, rowsBefore: rows.length }
  }
}

function expectHonest(outcome: Outcome): void {
  if ('taken' in outcome) {
    expect(outcome.taken.length).toBeGreaterThan(0)
    for (const { weightMg } of outcome.taken) if (!(weightMg > 0 && weightMg <= 5000)) throw new Error(`took ${weightMg} mg`)
    return
  }
  const { problems, total } = outcome.refused
  expect(outcome.rowsBefore).toBe(0)
  expect(total).toBeGreaterThanOrEqual(problems.length)
  expect(problems.length).toBeGreaterThan(0)
  for (const { line, column, message } of problems) {
    if (!(Number.isInteger(line) && line >= 1 && column !== '' && message.includes('expected'))) throw new Error(`no place in: ${message}`)
  }
}

const decimalsMg = fc.integer({ min: 0, max: 3 })
const capsule = fc.record({
  thousandths: fc.integer({ min: 1000, max: 5_000_000 }),
  decimals: decimalsMg,
  inGrams: fc.boolean(),
  position: fc.integer({ min: 1, max: 60 }),
})
type Capsule = { thousandths: number; decimals: number; inGrams: boolean; position: number }
const form = fc.record({
  delimiter: fc.constantFrom(',' as const, ';' as const, '\t' as const, '|' as const),
  decimal: fc.constantFrom('.' as const, ',' as const),
  lineEnd: fc.constantFrom('\n', '\r\n', '\r'),
  encoding: fc.constantFrom('utf-8' as const, 'utf-8-bom' as const, 'utf-16le' as const, 'utf-16be' as const),
  preamble: fc.array(fc.constantFrom('Protocol', 'Ópérateur 1', '-----', ''), { maxLength: 3 }),
  quotes: fc.boolean(),
  statistics: fc.boolean(),
})
const validFile = fc.record({ form, capsules: fc.array(capsule, { minLength: 1, maxLength: 12 }) })
type ValidFile = { form: Form; capsules: Capsule[] }
type Form = typeof form extends fc.Arbitrary<infer F> ? F : never

/** What the balance shows for a capsule, and the milligrams it stands for, kept in whole thousandths. */
function shown({ thousandths, decimals, inGrams }: Capsule, decimal: string): { digits: string; weightMg: number } {
  const step = 10 ** (3 - decimals)
  const rounded = Math.round(thousandths / step) * step
  const digits = inGrams ? (rounded / 1e6).toFixed(3 + decimals) : (rounded / 1000).toFixed(decimals)
  return { digits: digits.replace('.', decimal), weightMg: rounded / 1000 }
}

function write({ form, capsules }: ValidFile): { lines: string[]; how: BalanceFileMapping; decimal: '.' | ',' } {
  const decimal = form.delimiter === form.decimal ? '.' : form.decimal
  const quoted = (cell: string): string => (form.quotes ? `"${cell}"` : cell)
  const line = (...cells: string[]): string => cells.map(quoted).join(form.delimiter)
  const rows = capsules.map((one) => line(String(one.position), shown(one, decimal).digits, one.inGrams ? 'g' : 'mg'))
  const statistics = form.statistics ? [line('Mean', `400${decimal}1`), `n = ${capsules.length}`] : []
  return {
    lines: [...form.preamble, line('place', 'reading', 'unit'), ...rows, ...statistics],
    decimal,
    how: mapping({
      delimiter: form.delimiter,
      decimal,
      headerRow: form.preamble.length + 1,
      columns: { weight: 'reading', position: 'place', unit: 'unit' },
      unit: null,
    }),
  }
}

function encode(text: string, encoding: Form['encoding']): Uint8Array {
  if (encoding === 'utf-8') return bytesOf(text)
  if (encoding === 'utf-8-bom') return bytesOf(`\ufeff${text}`)
  const bytes = Buffer.from(`\ufeff${text}`, 'utf16le')
  return encoding === 'utf-16le' ? bytes : bytes.swap16()
}

describe('20,000 generated files', () => {
  test('a valid file in any form gives back exactly its weights, digits and positions', async () => {
    await fc.assert(
      fc.asyncProperty(validFile, async (file) => {
        const { lines, how, decimal } = write(file)
        const outcome = await read(encode(lines.join(file.form.lineEnd), file.form.encoding), how)
        if (!('taken' in outcome)) throw outcome.refused
        const expected = file.capsules.map((one) => ({ ...shown(one, decimal), position: one.position }))
        expect(outcome.taken.map(({ shown: digits, weightMg, position }) => ({ digits, weightMg, position }))).toEqual(expected)
      }),
      { numRuns: RUNS.valid },
    )
  })

  const breakage = fc.constantFrom(
    'OL',
    '',
    'NaN',
    '-12.5',
    '0',
    '1e3',
    '5000.001',
    '=1+1',
    '@x',
    '12.5 kg',
    '12.5?',
    'unstable',
    '99999999',
    '"',
    '12..5',
  )
  test('one broken weight refuses the whole file and is named by its line', async () => {
    await fc.assert(
      fc.asyncProperty(validFile, fc.nat(), breakage, async (file, at, broken) => {
        const plainForm: ValidFile = { ...file, form: { ...file.form, quotes: false, decimal: '.', delimiter: ';' } }
        const { lines, how } = write(plainForm)
        const line = file.form.preamble.length + 1 + (at % file.capsules.length)
        lines[line] = `1;${broken};mg`
        const outcome = await read(encode(lines.join(file.form.lineEnd), file.form.encoding), how)
        expectHonest(outcome)
        if (!('refused' in outcome)) throw new Error(`took ${broken}`)
        expect(outcome.refused.problems.map((problem) => problem.line)).toContain(line + 1)
      }),
      { numRuns: RUNS.broken },
    )
  })

  const cell = fc.oneof(
    fc.constantFrom(
      '',
      '"',
      '""',
      '=',
      '-',
      '+1',
      '496.1',
      '0,4961',
      '1e9',
      'mg',
      'g',
      'kg',
      'S',
      'OL',
      'n = 3',
      'Mean',
      '\u0000',
      '\u2028',
      'weight',
      '2026-03-01 10:00',
    ),
    fc.string({ maxLength: 8 }),
    fc.string({ unit: 'binary', maxLength: 4 }),
  )
  const nonsense = fc.array(fc.array(cell, { maxLength: 5 }), { maxLength: 12 })
  const anyMapping = fc.record({
    delimiter: fc.constantFrom(';', '\t', '|'),
    headerRow: fc.constantFrom(null, 1, 2),
    weight: fc.integer({ min: 1, max: 4 }),
    status: fc.boolean(),
    unit: fc.constantFrom('mg', 'g'),
  })
  test('nonsense is taken as a whole or refused with a place, and its preview never fails', async () => {
    await fc.assert(
      fc.asyncProperty(nonsense, anyMapping, async (table, { delimiter, headerRow, weight, status, unit }) => {
        const bytes = bytesOf(table.map((cells) => cells.join(delimiter)).join('\n'))
        const columns = status ? { weight, status: 5 } : { weight }
        expectHonest(await read(bytes, mapping({ delimiter, headerRow, columns, unit, stableWords: ['S'] })))
        const seen = await previewBalanceFile(bytes, { now: NOW })
        if (seen.mapping) expectHonest(await read(bytes, seen.mapping))
      }),
      { numRuns: RUNS.nonsense },
    )
  })

  test('bytes of any kind never crash the reader', async () => {
    const head = fc.constantFrom('', 'weight\n', '\ufeffweight\n496.1\n', 'PK\u0003\u0004')
    await fc.assert(
      fc.asyncProperty(head, fc.uint8Array({ maxLength: 200 }), async (start, tail) => {
        const bytes = Buffer.concat([Buffer.from(start), tail])
        expectHonest(await read(bytes, mapping()))
        await previewBalanceFile(bytes, { now: NOW })
      }),
      { numRuns: RUNS.bytes },
    )
  })
})

describe('the way does not matter', () => {
  test('bytes in pieces of any size read the same as in one', async () => {
    await fc.assert(
      fc.asyncProperty(validFile, fc.integer({ min: 1, max: 7 }), async (file, size) => {
        const { lines, how } = write(file)
        const bytes = encode(lines.join(file.form.lineEnd), file.form.encoding)
        async function* pieces(): AsyncGenerator<Uint8Array> {
          for (let from = 0; from < bytes.length; from += size) yield await Promise.resolve(bytes.subarray(from, from + size))
        }
        const rows: WeighingRow[] = []
        for await (const batch of readBalanceFile(pieces(), how, { now: NOW })) rows.push(...batch)
        expect({ taken: rows }).toEqual(await read(bytes, how))
      }),
      { numRuns: 300 },
    )
  })

  test('characters cut by a piece of 64 kB are whole', async () => {
    for (const [encoding, letter] of [
      ['utf-8', 'é'],
      ['utf-8', '€'],
      ['utf-8', '𝄞'],
      ['utf-16le', '𝄞'],
      ['utf-16be', '𝄞'],
    ] as const) {
      for (let shift = 0; shift < 4; shift++) {
        const filler = `${'x'.repeat(shift)},${letter.repeat(2000)}\n`
        const text = `label,note,weight\n${Array.from({ length: 60 }, () => filler.replace('\n', ',496.1\n')).join('')}`
        const outcome = await read(encode(text, encoding), mapping({ columns: { weight: 'weight' } }))
        expect('taken' in outcome && outcome.taken.length).toBe(60)
      }
    }
  })

  test('the fast reader of plain lines agrees with the full reader wherever it answers', () => {
    const digits = fc.stringMatching(/^[0-9]{0,7}([.,][0-9]{0,7})?$/)
    const layout = layoutOf(mapping({ delimiter: ';', columns: { weight: 3, position: 1, sample: 2 } }), null, 3)
    for (const decimal of ['.', ','] as const) {
      for (const unit of ['mg', 'g'] as const) {
        const how = mapping({ delimiter: ';', decimal, columns: { weight: 3, position: 1, sample: 2 }, unit })
        const plain = PlainLines.for({ ...layout, defaultUnit: unit }, how, { now: NOW, readabilityMg: 0.01 })
        let answered = 0
        fc.assert(
          fc.property(fc.nat(300), fc.nat(99), digits, (position, sample, weight) => {
            const text = `${position};${sample};${weight}`
            const fast = plain?.read(text, 0, text.length, 7)
            if (!fast) return
            answered++
            const findings = new Findings()
            const reader = new RowReader(how, { ...layout, defaultUnit: unit }, { now: NOW, readabilityMg: 0.01 }, findings)
            expect(reader.read(text.split(';'), 7)).toEqual(fast)
          }),
          { numRuns: 2000 },
        )
        expect(answered).toBeGreaterThan(50)
      }
    }
  })
})
