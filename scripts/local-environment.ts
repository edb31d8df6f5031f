import { randomBytes } from 'node:crypto'
import { join } from 'node:path'
import { z } from 'zod'
import { readJson, writeSecretJson } from './json-file.ts'

const Secrets = z.object({ accessTokenKey: z.string() })

/** The key that signs access tokens on this machine: by chance, made once, readable by its owner alone. */
function accessTokenKey(folder: string): string {
  const file = join(folder, 'secrets.json')
  const known = readJson(file, Secrets)
  if (known) return known.accessTokenKey
  const secrets = { accessTokenKey: randomBytes(32).toString('hex') }
  writeSecretJson(file, secrets)
  return secrets.accessTokenKey
}

/**
 * What Scruple adds to the environment when it brings its own database: the demo, a key of its own, and mail that is
 * caught unless the environment says where to send it. What a person has set goes before.
 */
export function localEnvironment(folder: string): Record<string, string | undefined> {
  return {
    DEMO: 'true',
    MAIL_CATCHER: process.env['SMTP_HOST'] === undefined ? 'true' : 'false',
    ACCESS_TOKEN_KEYS: accessTokenKey(folder),
    ...process.env,
    DATA_DIRECTORY: folder,
  }
}
