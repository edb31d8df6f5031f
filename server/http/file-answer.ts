import type { Readable } from 'node:stream'

/** An answer that is a file: shown or saved by the browser under its own name, never sniffed. */
export class FileAnswer {
  constructor(readonly file: { name: string; mediaType: string; content: Buffer | Readable; isInline?: boolean }) {}
}
