import { createHash } from 'node:crypto'
import { existsSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { build } from 'vite'

const SOURCES = ['src', 'shared', 'public', 'index.html', 'vite.config.ts', 'package-lock.json']
const STAMP = join('dist', '.built-from')

function filesOf(path: string): string[] {
  if (!existsSync(path)) return []
  const entries = path.includes('.') ? undefined : readdirSync(path, { withFileTypes: true, recursive: true })
  if (!entries) return [path]
  return entries
    .filter((entry) => entry.isFile())
    .map((entry) => join(entry.parentPath, entry.name))
    .sort()
}

function fingerprint(): string {
  const hash = createHash('sha256')
  for (const file of SOURCES.flatMap(filesOf)) hash.update(file).update(readFileSync(file))
  return hash.digest('hex')
}

/** Builds the client into dist/ unless what is there was built from the same sources. */
export async function buildClientIfStale(): Promise<void> {
  const wanted = fingerprint()
  if (existsSync(STAMP) && readFileSync(STAMP, 'utf8') === wanted) return
  process.stdout.write('Building the client …\n')
  await build({ logLevel: 'warn' })
  mkdirSync('dist', { recursive: true })
  writeFileSync(STAMP, wanted)
}
