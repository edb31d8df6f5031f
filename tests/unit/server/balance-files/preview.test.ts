import { describe, expect, test } from 'vitest'
import { BalanceFileMapping, BalanceFilePreview } from '#shared/schemas/balance-files.ts'
import { previewBalanceFile } from '#server/balance-files/preview.ts'
import { NOW, bytesOf, fixture, mapping } from './files.ts'

const preview = (bytes: Uint8Array) => previewBalanceFile(bytes, { now: NOW, timeZone: 'Europe/Dublin' })

describe('the guess for a file', () => {
  test.each([
    ['plain-mg.csv', { weight: 'Weight [mg]', position: 'Position' }, 'mg', []],
    ['utf-16le-tabs.csv', { weight: 'Masse', unit: 'Unité', sample: 'Échantillon' }, null, []],
    ['utf-16be-unmarked.csv', { weight: 'Weight (mg)' }, 'mg', []],
    ['windows-1252.csv', { weight: 'Füllung [mg]', position: 'Platz' }, 'mg', []],
    ['utf-8-bom-pipe.csv', { weight: 'gross', position: 'position', segment: 'segment' }, null, []],
    ['mixed-units-by-row.csv', { weight: 'weight', unit: 'unit' }, null, []],
    ['time-gaps.csv', { weight: 'weight_mg', time: 'time' }, 'mg', []],
    ['quoted.csv', { weight: 'Weight [mg]' }, 'mg', []],
    [
      'semicolon-comma-grams.csv',
      { weight: 'Weight', unit: 'Unit', sample: 'Sample', time: 'Time', date: 'Date', status: 'Status' },
      null,
      [],
    ],
  ])('%s is right and reads without a problem', async (name, columns, unit, questions) => {
    const seen = await preview(fixture(name))
    expect(seen.mapping?.columns).toEqual(columns)
    expect(seen.guess?.unit).toBe(unit)
    expect(seen.questions).toEqual(questions)
    expect(seen.problems).toEqual([])
    expect(seen.rows.length).toBeGreaterThan(0)
    expect(BalanceFilePreview.safeParse(seen).success).toBe(true)
  })

  test('never assumes a unit', async () => {
    const seen = await preview(fixture('one-column-decimal-comma.csv'))
    expect(seen.guess).toMatchObject({ decimal: ',', headerRow: null, unit: null })
    expect(seen.mapping).toBeNull()
    expect(seen.questions).toEqual(['Are the weights in g or in mg? Nothing in the file says so.'])
  })

  test('asks whether the day or the month stands first where both fit', async () => {
    const seen = await preview(bytesOf('weight [mg],time\n496.1,01.02.2026 10:00\n496.2,01.02.2026 10:01\n'))
    expect(seen.questions).toEqual(['Is the day or the month written first? Both fit.'])
  })

  test('tells counted lines from decimal commas', async () => {
    expect((await preview(bytesOf('1,496\n2,497\n3,495\n'))).guess?.delimiter).toBe(',')
    expect((await preview(bytesOf('496,1\n497,0\n495,3\n'))).guess?.decimal).toBe(',')
  })

  test('uses the mapping that was kept for the balance, and shows where it fails', async () => {
    const seen = await previewBalanceFile(bytesOf('weight\n496.1\nOL\n'), { now: NOW, mapping: mapping() })
    expect(seen.problems.map(({ line, column }) => [line, column])).toEqual([[3, 'weight']])
    expect(seen.questions).toEqual([])
  })

  test('shows twenty rows of a long file and judges no half line', async () => {
    const seen = await preview(bytesOf('weight [mg]\n' + '496.125\n'.repeat(100_000)))
    expect(seen.rows).toHaveLength(20)
    expect(seen.problems.map(({ code }) => code)).toEqual(['large-sample'])
  })

  test.each(['hostile-empty.csv', 'hostile-header-only.csv', 'hostile-binary.csv', 'hostile-nul.csv', 'hostile-open-quote.csv'])(
    '%s has a preview that says why it cannot be read',
    async (name) => {
      const seen = await preview(fixture(name))
      expect(seen.problems).toHaveLength(1)
      expect(seen.mapping).toBeNull()
    },
  )
})

describe('a mapping is refused', () => {
  const parts = { delimiter: ',', decimal: '.', headerRow: 1, columns: { weight: 'weight' }, unit: 'mg' }
  test.each([
    ['with a word that is no setting', { ...parts, colour: 'red' }],
    ['without a weight column', { ...parts, columns: { unit: 'unit' } }],
    ['where the delimiter is the decimal sign', { ...parts, decimal: ',' }],
    ['where a name has no header line', { ...parts, headerRow: null }],
    ['where one column is used twice', { ...parts, columns: { weight: 'weight', sample: 'weight' } }],
    ['without any source for the unit', { ...parts, headerRow: null, columns: { weight: 1 }, unit: null }],
    ['with a status column but no word for stable', { ...parts, columns: { weight: 1, status: 2 } }],
    ['with a date but no time', { ...parts, columns: { weight: 1, date: 2 } }],
    ['splitting by a column that is not named', { ...parts, split: { by: 'sample-column' } }],
    ['splitting by time without a time', { ...parts, split: { by: 'time-gap', minutes: 5 } }],
    ['in a zone that is none', { ...parts, timeZone: 'Mars/Olympus' }],
    ['with data above the header', { ...parts, firstDataRow: 1 }],
  ])('%s', (_name, value) => {
    expect(BalanceFileMapping.safeParse(parts).success).toBe(true)
    expect(BalanceFileMapping.safeParse(value).success).toBe(false)
  })
})
