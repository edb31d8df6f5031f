import type { BalanceFileMapping } from '#shared/schemas/balance-files.ts'
import { headerMissing, layoutOf, refuseDuplicates, type Layout } from './columns.ts'
import { isFormula } from './formulas.ts'
import { PlainLines } from './plain.ts'
import { UnreadableError, WHOLE_FILE, type Findings } from './problems.ts'
import { blockRecords, type LineBlock } from './records.ts'
import { RowReader, type RowLimits, type WeighingRow } from './row.ts'
import { SampleSplitter } from './samples.ts'
import { summaryLineTest } from './summary-lines.ts'

interface Limits extends RowLimits {
  maxRows: number
  maxRowsPerSample: number
}

interface DataPart {
  layout: Layout
  reader: RowReader
  plain: PlainLines | undefined
}

/** Takes the blocks of one file in order: passes the preamble, finds the columns, reads and places each weighing. */
export class FileRows {
  /** Weighings read and not yet taken away. */
  readonly pending: WeighingRow[] = []
  count = 0
  private data: DataPart | undefined
  private readonly firstDataLine: number
  private readonly splitter: SampleSplitter
  private readonly isSummaryLine: (firstCell: string) => boolean

  constructor(
    private readonly mapping: BalanceFileMapping,
    private readonly limits: Limits,
    private readonly findings: Findings,
  ) {
    this.firstDataLine = mapping.firstDataRow ?? (mapping.headerRow ?? 0) + 1
    this.splitter = new SampleSplitter(mapping.split, limits.maxRowsPerSample)
    this.isSummaryLine = summaryLineTest(mapping.summaryWords)
  }

  get sampleCount(): number {
    return this.splitter.count
  }

  take(block: LineBlock): void {
    const plain = this.data?.plain
    if (plain && !block.hasQuotes && block.firstLine >= this.firstDataLine) this.takePlain(block, plain)
    else for (const { line, cells } of blockRecords(block, this.mapping.delimiter)) this.takeRecord(cells, line)
  }

  private takePlain({ text, firstLine }: LineBlock, plain: PlainLines): void {
    let line = firstLine
    for (let start = 0; start <= text.length; line++) {
      const lineEnd = text.indexOf('\n', start)
      const end = lineEnd < 0 ? text.length : lineEnd
      const row = plain.read(text, start, end, line)
      if (row) this.place(row)
      else this.takeOneLine(text.slice(start, end), line)
      start = end + 1
    }
  }

  private takeOneLine(text: string, firstLine: number): void {
    for (const { line, cells } of blockRecords({ text, firstLine, hasQuotes: false }, this.mapping.delimiter)) this.takeRecord(cells, line)
  }

  private takeRecord(cells: string[], line: number): void {
    const { headerRow } = this.mapping
    if (line === headerRow) {
      this.takeHeader(cells, line)
      return
    }
    const firstCell = cells.find((cell) => cell.trim() !== '')
    if (firstCell === undefined) return
    if (line < this.firstDataLine) {
      this.refuseFormulas(cells, line)
      return
    }
    if (!this.data && headerRow !== null) throw headerMissing(headerRow, 'no such line')
    this.data ??= this.open(null, cells.length)
    if (this.refuseFormulas(cells, line)) return
    if (this.isSummaryLine(firstCell)) {
      this.findings.note(line, `Left out as a line of statistics: ${cells.join(' ').trim().slice(0, 80)}`)
      return
    }
    if (this.refuseWidth(cells, line, this.data.layout)) return
    const row = this.data.reader.read(cells, line)
    if (row) this.place(row)
  }

  private takeHeader(cells: string[], line: number): void {
    const header = cells.slice(0, usedWidth(cells))
    if (header.length === 0) throw headerMissing(line, 'an empty line')
    this.refuseFormulas(header, line)
    refuseDuplicates(header, line, this.findings)
    this.data = this.open(header, header.length)
  }

  private open(header: string[] | null, width: number): DataPart {
    const layout = layoutOf(this.mapping, header, width)
    const reader = new RowReader(this.mapping, layout, this.limits, this.findings)
    return { layout, reader, plain: PlainLines.for(layout, this.mapping, this.limits) }
  }

  private place(row: WeighingRow): void {
    this.count++
    if (this.count > this.limits.maxRows) {
      const expected = `at most ${this.limits.maxRows.toLocaleString('en')} weights in one file`
      throw new UnreadableError({ code: 'too-many-rows', line: row.line, column: WHOLE_FILE, found: 'one more', expected })
    }
    const problem = this.splitter.place(row)
    if (problem) {
      const role = problem.code === 'backward-time' ? 'time' : 'sample'
      const at = this.data?.layout.places[role]
      this.findings.problem({
        ...problem,
        line: row.line,
        column: at === undefined ? WHOLE_FILE : (this.data?.layout.names[at] ?? WHOLE_FILE),
      })
    }
    this.pending.push(row)
  }

  private refuseFormulas(cells: readonly string[], line: number): boolean {
    const before = this.findings.problemTotal
    for (const [place, cell] of cells.entries()) {
      if (!isFormula(cell)) continue
      const column = this.data?.layout.names[place] ?? `column ${place + 1}`
      this.findings.problem({ code: 'formula', line, column, found: cell, expected: 'a plain value; a formula is never taken' })
    }
    return this.findings.problemTotal > before
  }

  private refuseWidth(cells: readonly string[], line: number, { width, names }: Layout): boolean {
    const surplus = cells.findIndex((cell, place) => place >= width && cell.trim() !== '')
    if (cells.length >= width && surplus < 0) return false
    const column = surplus < 0 ? (names[cells.length] ?? `column ${cells.length + 1}`) : `column ${surplus + 1}`
    const found = `${surplus < 0 ? cells.length : usedWidth(cells)} cells`
    this.findings.problem({ code: 'column-count', line, column, found, expected: `${width} cells as in the columns of this file` })
    return true
  }
}

/** How many cells a record has up to its last one that is not empty. */
function usedWidth(cells: readonly string[]): number {
  return cells.findLastIndex((cell) => cell.trim() !== '') + 1
}
