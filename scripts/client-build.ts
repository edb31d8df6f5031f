import { spawnSync } from 'node:child_process'
import { createHash } from 'node:crypto'
import { existsSync, readdirSync, readFileSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { SetUpError } from './set-up-error.ts'

const SOURCE_FOLDERS = ['public', 'shared', 'src']
const SOURCE_FILES = ['index.html', 'package-lock.json', 'vite.config.ts']
/** Inside the built folder, so that whoever removes that also removes the claim. */
const STAMP = join('dist', '.built-from')

function filesIn(folder: string): string[] {
  if (!existsSync(folder)) return []
  return readdirSync(folder, { withFileTypes: true, recursive: true })
    .filter((entry) => entry.isFile())
    .map((entry) => join(entry.parentPath, entry.name))
}

function fingerprint(): string {
  const hash = createHash('sha256')
  for (const file of [...SOURCE_FOLDERS.flatMap(filesIn), ...SOURCE_FILES].sort()) {
    hash.update(`${file}\0`).update(createHash('sha256').update(readFileSync(file)).digest())
  }
  return hash.digest('hex')
}

/**
 * Builds the client into dist/ unless what is there was built from the same sources. In a process of its own: it needs
 * half a gigabyte that the server should not keep, and its own NODE_ENV.
 * @throws {SetUpError} when the build fails; its reasons are printed
 */
export function buildClientIfStale(): void {
  const wanted = fingerprint()
  if (existsSync(STAMP) && readFileSync(STAMP, 'utf8') === wanted) return
  process.stdout.write('Building the client …\n')
  const { status } = spawnSync(process.execPath, [join('node_modules', 'vite', 'bin', 'vite.js'), 'build', '--logLevel', 'warn'], {
    stdio: ['ignore', 'inherit', 'inherit'],
    env: { ...process.env, NODE_ENV: 'production' },
  })
  if (status !== 0) throw new SetUpError('The client could not be built; see the lines above.')
  writeFileSync(STAMP, wanted)
}
