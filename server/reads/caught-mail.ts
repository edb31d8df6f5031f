import { existsSync } from 'node:fs'
import { readdir, readFile, stat } from 'node:fs/promises'
import { join } from 'node:path'
import { simpleParser, type AddressObject } from 'mailparser'
import type { CaughtMail } from '#shared/schemas/mail.ts'
import { caughtMailFolder } from '../jobs/mail-catcher.ts'

const SHOWN = 100

function addresses(field: AddressObject | AddressObject[] | undefined): string[] {
  const list = Array.isArray(field) ? field : field ? [field] : []
  return list.flatMap(({ value }) => value.map(({ address }) => address ?? ''))
}

/** The newest mails that the catcher holds. */
export async function listCaughtMail(dataDirectory: string): Promise<CaughtMail[]> {
  const folder = caughtMailFolder(dataDirectory)
  if (!existsSync(folder)) return []
  const names = (await readdir(folder))
    .filter((name) => name.endsWith('.eml'))
    .sort()
    .reverse()
    .slice(0, SHOWN)
  return Promise.all(
    names.map(async (name) => {
      const path = join(folder, name)
      const { from, to, subject, text, messageId } = await simpleParser(await readFile(path))
      const { mtime } = await stat(path)
      return {
        id: name.replace('.eml', ''),
        receivedAt: mtime.toISOString(),
        from: addresses(from)[0] ?? '',
        to: addresses(to),
        subject: subject ?? '',
        text: text ?? '',
        messageId: messageId ?? '',
      }
    }),
  )
}
