import { createHash } from 'node:crypto'
import { describe, expect, test } from 'vitest'
import { readBalanceFile, readWholeBalanceFile } from '#server/balance-files/read.ts'
import { NOW, bytesOf, fixture, mapping, problemsOf, readText, refusalOf } from './files.ts'

const statusMapping = mapping({ columns: { weight: 'Weight [mg]', status: 'Status' }, stableWords: ['S'] })
const positionMapping = mapping({ columns: { weight: 'Weight [mg]', position: 'Position' } })

describe('what is refused, with its line and column', () => {
  test.each([
    ['hostile-empty.csv', positionMapping, ['empty-file 1 file']],
    ['hostile-header-only.csv', positionMapping, ['no-weights 1 file']],
    ['hostile-binary.csv', positionMapping, ['binary-file 1 file']],
    ['hostile-nul.csv', mapping({ columns: { weight: 'Weight [mg]' } }), ['binary-file 3 file']],
    ['hostile-formulas.csv', positionMapping, ['formula 2 Remark', 'formula 3 Remark', 'formula 4 Remark']],
    ['hostile-open-quote.csv', mapping({ columns: { weight: 'Weight [mg]' } }), ['open-quotes 3 file']],
    ['hostile-unit-unknown.csv', mapping({ unit: null }), ['unknown-unit 2 weight', 'unknown-unit 3 weight']],
    ['hostile-duplicate-headers.csv', mapping({ columns: { weight: 1 } }), ['duplicate-header 1 weight [MG]']],
    ['hostile-widths.csv', positionMapping, ['column-count 3 Weight [mg]', 'column-count 4 column 3']],
    [
      'hostile-marks.csv',
      statusMapping,
      [
        'unstable-reading 3 Weight [mg]',
        'unstable-reading 4 Weight [mg]',
        'unstable-reading 5 Status',
        'unstable-reading 6 Status',
        'unstable-reading 6 Weight [mg]',
        'unstable-reading 7 Weight [mg]',
        'unstable-reading 8 Weight [mg]',
      ],
    ],
    [
      'hostile-implausible.csv',
      positionMapping,
      [
        'implausible-weight 2 Weight [mg]',
        'implausible-weight 3 Weight [mg]',
        'implausible-weight 4 Weight [mg]',
        'not-a-number 5 Weight [mg]',
        'not-a-number 6 Weight [mg]',
        'too-many-decimals 7 Weight [mg]',
        'unknown-position 8 Position',
      ],
    ],
    [
      'hostile-times.csv',
      mapping({ columns: { weight: 'weight_mg', time: 'time' }, timeZone: 'Europe/Dublin' }),
      ['future-time 2 time', 'bad-time 3 time', 'bad-time 4 time', 'bad-time 5 time', 'bad-time 6 time'],
    ],
  ])('%s', async (name, how, expected) => {
    expect(await problemsOf(readWholeBalanceFile(fixture(name), how, { now: NOW }))).toEqual(expected)
  })

  test.each([
    ['a column that is not there', 'mass\n496.1', mapping(), 'unknown-column 1 weight'],
    ['a header line beyond the end', 'weight\n496.1', mapping({ headerRow: 3 }), 'no-weights 1 file'],
    ['an empty header line', '\nweight\n496.1', mapping(), 'no-header 1 file'],
    ['a header in another unit', 'weight [g]\n0.4961', mapping({ columns: { weight: 'weight [g]' } }), 'unit-conflict 1 weight [g]'],
    ['a header in an unknown unit', 'weight [ct]\n2.4', mapping({ columns: { weight: 1 }, unit: null }), 'unknown-unit 1 weight [ct]'],
    [
      'two units for one weight',
      'weight,unit\n496.1 mg,g',
      mapping({ columns: { weight: 1, unit: 2 }, unit: null }),
      'unit-conflict 2 weight',
    ],
    ['a unit nobody knows', 'weight,unit\n7.6,gr', mapping({ columns: { weight: 1, unit: 2 }, unit: null }), 'unknown-unit 2 unit'],
    ['an empty unit', 'weight,unit\n7.6,', mapping({ columns: { weight: 1, unit: 2 }, unit: 'mg' }), 'unknown-unit 2 unit'],
    ['a decimal comma among points', 'weight;x\n496,1;0', mapping({ delimiter: ';' }), 'not-a-number 2 weight'],
    ['a tare', 'weight\nT 96.1', mapping(), 'not-a-weight 2 weight'],
    ['a missing weight', 'weight,x\n,1', mapping(), 'not-a-weight 2 weight'],
    ['a control character', 'weight\n496.1\n49\u00023', mapping(), 'control-character 3 file'],
    [
      'a segment that the machine has not',
      'weight,seg\n496.1,13',
      mapping({ columns: { weight: 1, segment: 'seg' } }),
      'unknown-segment 2 seg',
    ],
    ['a sample without a name', 'weight,s\n496.1,', mapping({ columns: { weight: 1, sample: 's' } }), 'no-sample 2 s'],
    [
      'a sample in two pieces',
      'weight,s\n496.1,A\n496.1,B\n496.1,A',
      mapping({ columns: { weight: 1, sample: 's' }, split: { by: 'sample-column' } }),
      'split-sample 4 s',
    ],
    [
      'time that runs backwards',
      'weight,t\n496.1,2026-03-01 10:00\n496.1,2026-03-01 09:00',
      mapping({ columns: { weight: 1, time: 't' }, split: { by: 'time-gap', minutes: 5 } }),
      'backward-time 3 t',
    ],
  ])('%s', async (_name, text, how, expected) => {
    expect(await problemsOf(readText(text, how, { segments: 12 }))).toEqual([expected])
  })

  test('a line of a megabyte, at once and without reading it twice', async () => {
    expect(await problemsOf(readText(`weight\n${'9'.repeat(1_000_000)}\n`, mapping()))).toEqual(['long-line 2 file'])
    expect(await problemsOf(readText(`weight\n"${'9\n'.repeat(500_000)}`, mapping()))).toEqual(['open-quotes 2 file'])
  })

  test('a file above the limit of bytes, before a byte is read', async () => {
    expect(await problemsOf(readText('weight\n496.1\n', mapping(), { maxBytes: 12 }))).toEqual(['too-large 1 file'])
  })

  test('a stream above the limit, as soon as it passes it', async () => {
    let sent = 0
    async function* endless(): AsyncGenerator<Uint8Array> {
      await Promise.resolve()
      for (;;) {
        sent += 1000
        yield bytesOf('weight\n'.padEnd(1000, ' '))
      }
    }
    await refusalOf(readWholeBalanceFile(endless(), mapping(), { now: NOW, maxBytes: 50_000 }))
    expect(sent).toBe(51_000)
  })

  test('more weights than the limit, or more capsules than a sample may have', async () => {
    const text = 'weight\n1\n2\n3\n4\n'
    expect(await problemsOf(readText(text, mapping(), { maxRows: 3 }))).toEqual(['too-many-rows 5 file'])
    expect(await problemsOf(readText(text, mapping(), { maxRowsPerSample: 2 }))).toEqual(['large-sample 4 file'])
  })

  test('more decimals than the balance can show', async () => {
    expect(await problemsOf(readText('weight\n496.10\n496.1\n', mapping(), { readabilityMg: 0.1 }))).toEqual(['too-many-decimals 2 weight'])
  })

  test('text that changes its encoding half-way', async () => {
    const bytes = Buffer.concat([Buffer.from('weight,é\n1,é\n'.padEnd(70_000, '2,x\n')), Buffer.from('3,\xfc\n', 'latin1')])
    const refusal = await refusalOf(readWholeBalanceFile(bytes, mapping(), { now: NOW, maxRowsPerSample: 100_000 }))
    expect(refusal.problems.map(({ code }) => code)).toEqual(['mixed-encoding'])
  })

  test('two hundred problems are listed and all are counted', async () => {
    const refusal = await refusalOf(readText(`weight\n${'x1\n'.repeat(5000)}`, mapping()))
    expect(refusal.problems).toHaveLength(200)
    expect(refusal.total).toBe(5000)
    expect(refusal.message).toContain('4999 more')
  })

  test('a message quotes what was found on one short line', async () => {
    const { problems } = await refusalOf(readText(`weight\n"49\u202e6\n${'z'.repeat(200)}"\n`, mapping()))
    expect(problems[0]?.found).toBe(`49·6·${'z'.repeat(75)}…`)
    expect(problems[0]?.message).toMatch(/^Line 2, weight: found 49·6·z+…, expected a number\.$/)
  })
})

describe('what is taken', () => {
  test('UTF-16, Windows-1252, decimal commas, grams, quotes and line breaks inside cells', async () => {
    const weights = async (name: string, how: ReturnType<typeof mapping>) =>
      (await readWholeBalanceFile(fixture(name), how, { now: NOW })).rows.map(({ weightMg }) => weightMg)
    const tabs = { delimiter: '\t', unit: null }
    expect(await weights('utf-16le-tabs.csv', mapping({ ...tabs, columns: { weight: 'Masse', unit: 'Unité' } }))).toEqual([
      301.2, 299.8, 300.5,
    ])
    expect(await weights('utf-16be-unmarked.csv', mapping({ columns: { weight: 'Weight (mg)' } }))).toEqual([97.4, 98, 96.9])
    const umlaut = mapping({ delimiter: ';', decimal: ',', columns: { weight: 'Füllung [mg]', position: 'Platz' } })
    expect(await weights('windows-1252.csv', umlaut)).toEqual([402.5, 398, 401.1])
    expect(await weights('quoted.csv', mapping({ columns: { weight: 'Weight [mg]' } }))).toEqual([496.1, 493.8, 482])
    const mixed = mapping({ delimiter: ';', decimal: ',', columns: { weight: 'weight', unit: 'unit' }, unit: null })
    expect(await weights('mixed-units-by-row.csv', mixed)).toEqual([496.1, 493.8, 482])
  })

  test('a protocol with preamble, two samples, split date and time, and lines of statistics left out with a note', async () => {
    const how = mapping({
      delimiter: ';',
      decimal: ',',
      headerRow: 4,
      columns: { weight: 'Weight', unit: 'Unit', sample: 'Sample', time: 'Time', date: 'Date', status: 'Status' },
      unit: null,
      stableWords: ['S'],
      timeFormat: 'day-first',
      timeZone: 'Europe/Dublin',
      split: { by: 'sample-column' },
    })
    const bytes = fixture('semicolon-comma-grams.csv')
    const { rows, report } = await readWholeBalanceFile(bytes, how, { now: NOW, readabilityMg: 0.1 })
    expect(rows.map(({ line, sampleIndex, sample, weightMg }) => [line, sampleIndex, sample, weightMg])).toEqual([
      [5, 0, 'R1', 496.1],
      [6, 0, 'R1', 493.8],
      [7, 0, 'R1', 482],
      [8, 1, 'R2', 497.3],
      [9, 1, 'R2', 495.5],
      [10, 1, 'R2', 499],
    ])
    expect(rows[2]).toMatchObject({ shown: '0,4820', unit: 'g', decimalsMg: 1, status: 'S', weighedAt: new Date('2026-03-31T13:05:20Z') })
    expect(report).toMatchObject({ encoding: 'utf-8', rows: 6, samples: 2, bytes: bytes.byteLength, noteTotal: 3 })
    expect(report.notes.map(({ line }) => line)).toEqual([11, 12, 13])
    expect(report.sha256).toBe(createHash('sha256').update(bytes).digest('hex'))
  })

  test('a signed number is no formula, and net and gross marks are kept', async () => {
    const { rows } = await readText('weight\n+3.2\n+ 482.0 mg\nN 496.10 mg\nG 97.4\n', mapping())
    expect(rows.map(({ weightMg, mark, shown }) => [weightMg, mark, shown])).toEqual([
      [3.2, null, '3.2'],
      [482, null, '482.0'],
      [496.1, 'net', '496.10'],
      [97.4, 'gross', '97.4'],
    ])
  })

  test('pauses in time split samples, and the repeated hour of autumn is told by the order of the lines', async () => {
    const how = mapping({
      columns: { weight: 'weight_mg', time: 'time' },
      timeZone: 'Europe/Dublin',
      split: { by: 'time-gap', minutes: 10 },
    })
    const { rows, report } = await readWholeBalanceFile(fixture('time-gaps.csv'), how, { now: NOW })
    expect(rows.map(({ sampleIndex, weighedAt }) => `${sampleIndex} ${weighedAt?.toISOString()}`)).toEqual([
      '0 2026-10-24T23:58:00.000Z',
      '0 2026-10-25T00:00:00.000Z',
      '1 2026-10-25T00:30:00.000Z',
      '2 2026-10-25T01:00:00.000Z',
      '2 2026-10-25T01:02:00.000Z',
    ])
    expect(report.noteTotal).toBe(4)
  })

  test('times in each order of parts, with and without zone, in twelve hours', async () => {
    const times = async (timeFormat: string, text: string) => {
      const how = mapping({ columns: { weight: 1, time: 2 }, headerRow: null, timeFormat, timeZone: 'America/New_York' })
      return (await readText(`496.1,${text}`, how)).rows[0]?.weighedAt?.toISOString()
    }
    expect(await times('year-first', '2026-03-01T10:00:00.25+05:30')).toBe('2026-03-01T04:30:00.250Z')
    expect(await times('year-first', '2026/03/01 10:00Z')).toBe('2026-03-01T10:00:00.000Z')
    expect(await times('day-first', '01.03.26 10:00')).toBe('2026-03-01T15:00:00.000Z')
    expect(await times('month-first', '7/4/2026 12:05:06 AM')).toBe('2026-07-04T04:05:06.000Z')
  })

  test('line ends of every kind count as lines', async () => {
    for (const end of ['\n', '\r\n', '\r']) {
      const { rows } = await readText(['weight', '1', '', '3', ''].join(end), mapping())
      expect(rows.map(({ line }) => line)).toEqual([2, 4])
    }
  })

  test('a hundred thousand weights come in batches of ten thousand at most', async () => {
    const sizes: number[] = []
    const reading = readBalanceFile(bytesOf('weight\n' + '496.1\n'.repeat(100_000)), mapping(), { now: NOW, maxRowsPerSample: 100_000 })
    for await (const batch of reading) sizes.push(batch.length)
    expect(Math.max(...sizes)).toBe(10_000)
    expect(sizes.reduce((sum, size) => sum + size)).toBe(100_000)
  })

  test('no batch follows the first problem', async () => {
    const text = 'weight\n' + '496.1\n'.repeat(30_000) + 'x9\n' + '496.1\n'.repeat(30_000)
    let taken = 0
    const reading = readBalanceFile(bytesOf(text), mapping(), { now: NOW, maxRowsPerSample: 100_000 })
    const refusal = refusalOf(
      (async () => {
        for await (const batch of reading) taken += batch.length
      })(),
    )
    expect((await refusal).problems).toMatchObject([{ line: 30_002, column: 'weight', found: 'x9' }])
    expect(taken).toBeLessThanOrEqual(30_000)
  })
})
