import { randomBytes } from 'node:crypto'
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import type { TestProject } from 'vitest/node'
import { loadConfig } from '#server/config.ts'
import { migrate } from '#server/database/migrate.ts'
import { startThrowAwayDatabase } from '../../scripts/mariadb/throw-away.ts'

declare module 'vitest' {
  export interface ProvidedContext {
    environment: Record<string, string>
  }
}

/** One throw-away database for the whole run, with the real schema and the real accounts. */
export async function setup(project: TestProject): Promise<() => Promise<void>> {
  const database = process.env['DATABASE_PORT'] === undefined ? await startThrowAwayDatabase() : undefined
  const dataDirectory = mkdtempSync(join(tmpdir(), 'scruple-test-'))
  const environment = {
    ...givenDatabase(),
    ...database?.env,
    NODE_ENV: 'test',
    DATA_DIRECTORY: dataDirectory,
    ACCESS_TOKEN_KEYS: randomBytes(32).toString('hex'),
    LOG_LEVEL: 'error',
  }
  await migrate(loadConfig(environment).database)
  project.provide('environment', environment)
  return async () => {
    await database?.stop()
    rmSync(dataDirectory, { recursive: true, force: true })
  }
}

function givenDatabase(): Record<string, string> {
  const entries = Object.entries(process.env).filter((entry): entry is [string, string] => entry[0].startsWith('DATABASE_') && entry[1] !== undefined)
  return Object.fromEntries(entries)
}
