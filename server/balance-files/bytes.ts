import { createHash } from 'node:crypto'
import { UnreadableError, WHOLE_FILE } from './problems.ts'

const PIECE_BYTES = 65_536

/** The bytes of a file in pieces of one size, so that what is read never depends on how the bytes arrived. */
export class FilePieces {
  bytes = 0
  private readonly hash = createHash('sha256')

  constructor(
    private readonly source: AsyncIterable<Uint8Array> | Uint8Array,
    private readonly maxBytes: number,
  ) {}

  /** SHA-256 of the original bytes, in hexadecimal; to be asked once, after the last piece. */
  sha256(): string {
    return this.hash.digest('hex')
  }

  async *read(): AsyncGenerator<Uint8Array> {
    if (this.source instanceof Uint8Array) this.refuseAbove(this.source.byteLength)
    const piece = new Uint8Array(PIECE_BYTES)
    let filled = 0
    for await (const chunk of this.chunks()) {
      this.bytes += chunk.byteLength
      this.refuseAbove(this.bytes)
      this.hash.update(chunk)
      for (let from = 0; from < chunk.byteLength;) {
        const part = chunk.subarray(from, from + PIECE_BYTES - filled)
        piece.set(part, filled)
        filled += part.byteLength
        from += part.byteLength
        if (filled < PIECE_BYTES) break
        yield piece.slice()
        filled = 0
      }
    }
    if (filled > 0) yield piece.slice(0, filled)
  }

  private async *chunks(): AsyncGenerator<Uint8Array> {
    if (this.source instanceof Uint8Array) yield this.source
    else yield* this.source
  }

  private refuseAbove(bytes: number): void {
    if (bytes > this.maxBytes) throw tooLarge(bytes, this.maxBytes)
  }
}

/** The refusal of a file above the limit; callers that know the size beforehand make it before they read a byte. */
export function tooLarge(bytes: number, maxBytes: number): UnreadableError {
  const expected = `at most ${maxBytes.toLocaleString('en')} bytes`
  return new UnreadableError({
    code: 'too-large',
    line: 1,
    column: WHOLE_FILE,
    found: `${bytes.toLocaleString('en')} bytes or more`,
    expected,
  })
}
