import { UnreadableError, WHOLE_FILE, type ProblemPlace } from './problems.ts'

export type Encoding = 'utf-8' | 'utf-8-bom' | 'utf-16le' | 'utf-16be' | 'windows-1252'

/** First bytes of things that are no text, and what a person calls them. */
const SIGNATURES: readonly (readonly [string, readonly number[]])[] = [
  ['a spreadsheet or an archive (zip)', [0x50, 0x4b, 0x03, 0x04]],
  ['an old spreadsheet', [0xd0, 0xcf, 0x11, 0xe0]],
  ['a PDF document', [0x25, 0x50, 0x44, 0x46]],
  ['a compressed file (gzip)', [0x1f, 0x8b]],
  ['a picture (PNG)', [0x89, 0x50, 0x4e, 0x47]],
  ['a picture (JPEG)', [0xff, 0xd8, 0xff]],
]

const PROBE_BYTES = 1024
const CONTROL_CHARACTER = /[\u0000-\u0008\u000b\u000c\u000e-\u001f\u007f]/

/** Which encoding the first bytes show: by mark, by the zero bytes of plain text in UTF-16, else 8-bit text taken for UTF-8 first. */
export function detectEncoding(head: Uint8Array): Encoding {
  for (const [name, mark] of SIGNATURES) {
    if (mark.every((byte, place) => head[place] === byte)) throw notText(1, name)
  }
  if (head[0] === 0xef && head[1] === 0xbb && head[2] === 0xbf) return 'utf-8-bom'
  if (head[0] === 0xff && head[1] === 0xfe) return 'utf-16le'
  if (head[0] === 0xfe && head[1] === 0xff) return 'utf-16be'
  return detectUnmarkedUtf16(head.subarray(0, PROBE_BYTES)) ?? 'utf-8'
}

function detectUnmarkedUtf16(probe: Uint8Array): Encoding | undefined {
  const zeros = [0, 0]
  for (let place = 0; place < probe.length; place++) if (probe[place] === 0) zeros[place % 2]!++
  const enough = probe.length * 0.4
  if (probe.length >= 4 && zeros[1]! >= enough && zeros[0] === 0) return 'utf-16le'
  if (probe.length >= 4 && zeros[0]! >= enough && zeros[1] === 0) return 'utf-16be'
  return undefined
}

function notText(line: number, found: string): UnreadableError {
  return new UnreadableError({ code: 'binary-file', line, column: WHOLE_FILE, found, expected: 'a text file of weights (CSV)' })
}

/** Turns pieces of bytes into text. 8-bit text is UTF-8 until a byte says otherwise, from there on Windows-1252. */
export class TextReader {
  encoding: Encoding | undefined
  private line = 1
  private held: Uint8Array = new Uint8Array(0)
  private hasSeenMultibyte = false

  async *read(pieces: AsyncIterable<Uint8Array>): AsyncGenerator<string> {
    for await (const piece of pieces) {
      const isFirst = this.encoding === undefined
      this.encoding ??= detectEncoding(piece)
      const text = this.decode(this.joinHeld(piece))
      yield this.checked(isFirst ? text.replace(/^\ufeff/, '') : text)
    }
    if (this.held.length > 0) yield this.checked(this.decodeWhole(this.held))
  }

  private joinHeld(piece: Uint8Array): Uint8Array {
    if (this.held.length === 0) return piece
    const joined = new Uint8Array(this.held.length + piece.length)
    joined.set(this.held)
    joined.set(piece, this.held.length)
    return joined
  }

  /** Decodes all but a character that the piece cut in two. */
  private decode(bytes: Uint8Array): string {
    const whole = bytes.length - cutLength(bytes, this.encoding ?? 'utf-8')
    this.held = bytes.slice(whole)
    return this.decodeWhole(bytes.subarray(0, whole))
  }

  private decodeWhole(bytes: Uint8Array): string {
    const encoding = this.encoding ?? 'utf-8'
    const label = encoding === 'utf-8-bom' ? 'utf-8' : encoding
    try {
      const text = new TextDecoder(label, { fatal: true, ignoreBOM: true }).decode(bytes)
      if (label === 'utf-8' && text.length !== bytes.length) this.hasSeenMultibyte = true
      return text
    } catch (error) {
      if (!(error instanceof TypeError)) throw error
      if (encoding !== 'utf-8') throw notText(this.line, `bytes that are no ${label.toUpperCase()} text`)
      if (this.hasSeenMultibyte) throw this.unreadable('mixed-encoding', 'text in two encodings', 'one encoding throughout')
      this.encoding = 'windows-1252'
      return new TextDecoder('windows-1252').decode(bytes)
    }
  }

  private checked(text: string): string {
    const place = text.search(CONTROL_CHARACTER)
    if (place >= 0) {
      const code = text.charCodeAt(place)
      this.line += countLines(text.slice(0, place))
      if (code === 0) throw notText(this.line, 'a NUL byte')
      const name = `the control character U+${code.toString(16).toUpperCase().padStart(4, '0')}`
      throw this.unreadable('control-character', name, 'printable text')
    }
    this.line += countLines(text)
    return text
  }

  private unreadable(code: ProblemPlace['code'], found: string, expected: string): UnreadableError {
    return new UnreadableError({ code, line: this.line, column: WHOLE_FILE, found, expected })
  }
}

function countLines(text: string): number {
  let lines = 0
  for (let place = text.indexOf('\n'); place >= 0; place = text.indexOf('\n', place + 1)) lines++
  return lines
}

/** How many bytes at the end belong to a character that is not complete yet. */
function cutLength(bytes: Uint8Array, encoding: Encoding): number {
  if (encoding === 'windows-1252') return 0
  if (encoding === 'utf-16le' || encoding === 'utf-16be') return cutUtf16Length(bytes, encoding === 'utf-16le' ? 1 : 0)
  for (let back = 1; back <= Math.min(3, bytes.length); back++) {
    const byte = bytes[bytes.length - back]!
    if (byte < 0x80) return 0
    if (byte >= 0xc0) {
      const length = byte >= 0xf0 ? 4 : byte >= 0xe0 ? 3 : 2
      return length > back ? back : 0
    }
  }
  return 0
}

function cutUtf16Length(bytes: Uint8Array, highByte: 0 | 1): number {
  const odd = bytes.length % 2
  const high = bytes[bytes.length - odd - 2 + highByte]
  const isLeadSurrogate = high !== undefined && high >= 0xd8 && high <= 0xdb
  return odd + (isLeadSurrogate ? 2 : 0)
}
