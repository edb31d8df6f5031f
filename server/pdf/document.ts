import { createRequire } from 'node:module'
import PDFDocument from 'pdfkit'

const require = createRequire(import.meta.url)
const REGULAR = require.resolve('@expo-google-fonts/inter/400Regular/Inter_400Regular.ttf')
const STRONG = require.resolve('@expo-google-fonts/inter/600SemiBold/Inter_600SemiBold.ttf')

const MARGIN = 48
const INK = '#1E282C'
const SECOND = '#4B565A'
const HAIRLINE = '#DDD8CB'

/** A column of a printed table: its header, its share of the width, and whether it holds figures. */
export interface PrintColumn {
  header: string
  share: number
  isFigure?: boolean
}

/** A printed record: headings, sentences, facts and tables on paper, with a foot on every page. */
export class PrintedRecord {
  readonly #document = new PDFDocument({
    size: 'A4',
    margin: MARGIN,
    bufferPages: true,
    lang: 'en',
    tagged: true,
    displayTitle: true,
    autoFirstPage: true,
  })
  readonly #pieces: Buffer[] = []

  constructor(title: string) {
    this.#document.info.Title = title
    this.#document.registerFont('regular', REGULAR)
    this.#document.registerFont('strong', STRONG)
    this.#document.on('data', (piece: Buffer) => this.#pieces.push(piece))
    this.#document.font('strong').fontSize(18).fillColor(INK).text(title)
  }

  get #width(): number {
    return this.#document.page.width - 2 * MARGIN
  }

  #room(height: number): void {
    if (this.#document.y + height > this.#document.page.height - MARGIN - 24) this.#document.addPage()
  }

  heading(text: string): void {
    this.#room(60)
    this.#document.moveDown(0.9).font('strong').fontSize(12).fillColor(INK).text(text, MARGIN).moveDown(0.3)
  }

  sentence(text: string, isQuiet = false): void {
    this.#room(28)
    this.#document
      .font('regular')
      .fontSize(9)
      .fillColor(isQuiet ? SECOND : INK)
      .text(text, MARGIN, undefined, { width: this.#width, features: ['tnum'] })
      .moveDown(0.2)
  }

  facts(facts: readonly (readonly [string, string])[]): void {
    for (const [label, value] of facts) {
      this.#room(16)
      const { y } = this.#document
      this.#document.font('regular').fontSize(9).fillColor(SECOND).text(label, MARGIN, y, { width: 150 })
      const after = this.#document.y
      this.#document
        .font('regular')
        .fillColor(INK)
        .text(value, MARGIN + 160, y, { width: this.#width - 160, features: ['tnum'] })
      this.#document.y = Math.max(after, this.#document.y)
    }
  }

  table(columns: readonly PrintColumn[], rows: readonly (readonly string[])[]): void {
    const whole = columns.reduce((sum, { share }) => sum + share, 0)
    const widths = columns.map(({ share }) => (this.#width * share) / whole)
    this.#row(
      columns,
      columns.map(({ header }) => header),
      widths,
      'strong',
    )
    for (const row of rows) {
      const before = this.#document.bufferedPageRange().count
      this.#room(this.#rowHeight(row, widths))
      if (this.#document.bufferedPageRange().count > before)
        this.#row(
          columns,
          columns.map(({ header }) => header),
          widths,
          'strong',
        )
      this.#row(columns, row, widths, 'regular')
    }
    this.#document.moveDown(0.4)
  }

  #rowHeight(cells: readonly string[], widths: readonly number[]): number {
    this.#document.font('regular').fontSize(8)
    return Math.max(...cells.map((cell, place) => this.#document.heightOfString(cell, { width: (widths[place] ?? 40) - 6 }))) + 4
  }

  #row(columns: readonly PrintColumn[], cells: readonly string[], widths: readonly number[], font: 'regular' | 'strong'): void {
    const height = this.#rowHeight(cells, widths)
    this.#room(height)
    const { y } = this.#document
    let x = MARGIN
    for (const [place, cell] of cells.entries()) {
      const width = widths[place] ?? 40
      this.#document
        .font(font)
        .fontSize(8)
        .fillColor(font === 'strong' ? SECOND : INK)
        .text(cell, x, y + 2, { width: width - 6, align: columns[place]?.isFigure ? 'right' : 'left', features: ['tnum'] })
      x += width
    }
    this.#document
      .strokeColor(HAIRLINE)
      .lineWidth(0.5)
      .moveTo(MARGIN, y + height)
      .lineTo(MARGIN + this.#width, y + height)
      .stroke()
    this.#document.y = y + height
    this.#document.x = MARGIN
  }

  /** Writes the foot on every page and closes the document. */
  finish(foot: string): Promise<Buffer> {
    const { start, count } = this.#document.bufferedPageRange()
    for (let page = start; page < start + count; page++) {
      this.#document.switchToPage(page)
      this.#document.page.margins.bottom = 0
      this.#document
        .font('regular')
        .fontSize(7)
        .fillColor(SECOND)
        .text(`${foot}   page ${page + 1} of ${count}`, MARGIN, this.#document.page.height - 34, { width: this.#width, lineBreak: false })
    }
    const done = new Promise<Buffer>((resolve) => this.#document.on('end', () => resolve(Buffer.concat(this.#pieces))))
    this.#document.end()
    return done
  }
}
