import { mkdirSync } from 'node:fs'
import { writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import { SMTPServer } from 'smtp-server'
import { newId } from '../models/new-id.ts'
import type { Job } from './job.ts'

/** Where caught mail lies, as it would have gone out. */
export const caughtMailFolder = (dataDirectory: string): string => join(dataDirectory, 'mail')

async function bytesOf(stream: AsyncIterable<Buffer>): Promise<Buffer> {
  const pieces: Buffer[] = []
  for await (const piece of stream) pieces.push(piece)
  return Buffer.concat(pieces)
}

/** An SMTP server on the loopback interface that delivers nothing: every mail becomes a file, and a page shows them. */
export async function startMailCatcher(dataDirectory: string): Promise<Job & { port: number }> {
  const folder = caughtMailFolder(dataDirectory)
  mkdirSync(folder, { recursive: true })
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS', 'AUTH'],
    onData: (stream, _session, done) => {
      void bytesOf(stream)
        .then((bytes) => writeFile(join(folder, `${newId()}.eml`), bytes))
        .then(() => done(), done)
    },
  })
  const port = await new Promise<number>((resolve, reject) => {
    server.once('error', reject)
    const listening = server.listen(0, '127.0.0.1', () => {
      const address = listening.address()
      resolve(typeof address === 'object' && address !== null ? address.port : 0)
    })
  })
  return { port, stop: () => new Promise((resolve) => server.close(() => resolve())) }
}
