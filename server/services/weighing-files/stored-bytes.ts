import { createHash } from 'node:crypto'
import { createReadStream } from 'node:fs'
import { WeighingFileChunk } from '../../models/weighing-file-chunk.ts'

const CHUNK_BYTES = 1_000_000

/** The hash of a file on disk, read in pieces. */
export async function hashOfFile(path: string): Promise<string> {
  const hash = createHash('sha256')
  for await (const piece of createReadStream(path)) if (piece instanceof Buffer) hash.update(piece)
  return hash.digest('hex')
}

/** Stores the original bytes unchanged, in pieces that fit the database's packets. */
export async function storeBytes(weighingFileId: string, path: string): Promise<void> {
  let ordinal = 0
  for await (const bytes of createReadStream(path, { highWaterMark: CHUNK_BYTES })) {
    if (bytes instanceof Buffer) await WeighingFileChunk.create({ weighingFileId, ordinal: ordinal++, bytes })
  }
}

/** The original bytes, piece by piece. */
export async function* readBytes(weighingFileId: string): AsyncGenerator<Uint8Array> {
  for (let ordinal = 0; ; ordinal++) {
    const chunk = await WeighingFileChunk.findOne({ where: { weighingFileId, ordinal } })
    if (!chunk) return
    yield chunk.bytes
  }
}
