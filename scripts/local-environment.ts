import { randomBytes } from 'node:crypto'
import { existsSync, readFileSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { z } from 'zod'

const Secrets = z.object({ accessTokenKey: z.string() })

/** The key that signs access tokens on this machine: made once, readable by its owner alone. */
function accessTokenKey(folder: string): string {
  const file = join(folder, 'secrets.json')
  if (existsSync(file)) return Secrets.parse(JSON.parse(readFileSync(file, 'utf8'))).accessTokenKey
  const secrets = { accessTokenKey: randomBytes(32).toString('hex') }
  writeFileSync(file, JSON.stringify(secrets), { mode: 0o600 })
  return secrets.accessTokenKey
}

/** What a start on one's own machine adds to the environment: the demo, the mail catcher, a key of its own. */
export function localEnvironment(folder: string): Record<string, string> {
  return { DEMO: 'true', MAIL_CATCHER: 'true', ACCESS_TOKEN_KEYS: accessTokenKey(folder), DATA_DIRECTORY: folder }
}
