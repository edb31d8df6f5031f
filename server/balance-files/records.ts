import Papa from 'papaparse'
import { UnreadableError, WHOLE_FILE } from './problems.ts'

/** No balance writes a longer line; a longer one is refused, so that no line can cost more than its length. */
const MAX_LINE = 16_384

/** Some whole lines of text. `hasQuotes` says that cells may hold delimiters, line breaks and doubled quotes. */
export interface LineBlock {
  firstLine: number
  text: string
  hasQuotes: boolean
}

/** Cuts text into blocks of whole records: at a line end that stands outside quotes. Line ends become \n. */
export async function* lineBlocks(texts: AsyncIterable<string>): AsyncGenerator<LineBlock> {
  let carry = ''
  let line = 1
  let isAfterCarriageReturn = false
  for await (const text of texts) {
    let fresh = isAfterCarriageReturn && text.startsWith('\n') ? text.slice(1) : text
    isAfterCarriageReturn = text.endsWith('\r')
    if (fresh.includes('\r')) fresh = fresh.replace(/\r\n?/g, '\n')
    const buffer = carry + fresh
    const hasQuotes = buffer.includes('"')
    const end = hasQuotes ? lastOuterLineEnd(buffer) : buffer.lastIndexOf('\n')
    carry = buffer.slice(end + 1)
    if (end >= 0) {
      const block = { firstLine: line, text: buffer.slice(0, end), hasQuotes }
      line += countLineEnds(block.text) + 1
      yield block
    }
    if (carry.length > MAX_LINE) throw longLine(line, carry)
  }
  if (isOpen(carry)) throw openQuotes(line, carry)
  if (carry !== '') yield { firstLine: line, text: carry, hasQuotes: carry.includes('"') }
}

/** The cells of each record of a block with its line. Quoted blocks go through papaparse, plain ones need only a split. */
export function* blockRecords(block: LineBlock, delimiter: string): Generator<{ line: number; cells: string[] }> {
  let { firstLine: line } = block
  if (!block.hasQuotes) {
    for (const text of block.text.split('\n')) {
      if (text.length > MAX_LINE) throw longLine(line, text)
      yield { line: line++, cells: text.split(delimiter) }
    }
    return
  }
  const { data, errors } = Papa.parse<string[]>(block.text, { delimiter, newline: '\n', quoteChar: '"', skipEmptyLines: false })
  const broken = errors.find(({ type }) => type === 'Quotes')?.row
  for (const [row, cells] of data.entries()) {
    const length = cells.reduce((sum, cell) => sum + cell.length, 0)
    if (row === broken) throw openQuotes(line, cells.join(delimiter))
    if (length > MAX_LINE) throw longLine(line, cells.join(delimiter))
    yield { line, cells }
    line += 1 + cells.reduce((ends, cell) => ends + countLineEnds(cell), 0)
  }
}

/** The last line end with an even number of quotes before it; -1 without one. */
function lastOuterLineEnd(buffer: string): number {
  let end = -1
  let from = 0
  for (;;) {
    const opening = buffer.indexOf('"', from)
    const lineEnd = opening < 0 ? buffer.lastIndexOf('\n') : buffer.lastIndexOf('\n', opening)
    if (lineEnd >= from) end = lineEnd
    if (opening < 0) return end
    const closing = buffer.indexOf('"', opening + 1)
    if (closing < 0) return end
    from = closing + 1
  }
}

function countLineEnds(text: string): number {
  let ends = 0
  for (let place = text.indexOf('\n'); place >= 0; place = text.indexOf('\n', place + 1)) ends++
  return ends
}

function isOpen(text: string): boolean {
  let quotes = 0
  for (let place = text.indexOf('"'); place >= 0; place = text.indexOf('"', place + 1)) quotes++
  return quotes % 2 === 1
}

function longLine(line: number, text: string): UnreadableError {
  if (isOpen(text)) return openQuotes(line, text)
  const found = `a line of ${text.length.toLocaleString('en')} characters or more`
  return new UnreadableError({ code: 'long-line', line, column: WHOLE_FILE, found, expected: `at most ${MAX_LINE} characters a line` })
}

function openQuotes(line: number, text: string): UnreadableError {
  const expected = 'each quote mark around a cell closed, and doubled inside it'
  return new UnreadableError({ code: 'open-quotes', line, column: WHOLE_FILE, found: text, expected })
}
