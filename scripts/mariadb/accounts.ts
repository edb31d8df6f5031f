import { randomBytes } from 'node:crypto'
import { join } from 'node:path'
import { z } from 'zod'
import { readJson, writeSecretJson } from '../json-file.ts'

const Accounts = z.object({ runPassword: z.string(), migratePassword: z.string() })
export type Accounts = z.output<typeof Accounts>

export const DATABASE = 'scruple'
export const MIGRATE_USER = 'scruple_migrate'
const RUN_USER = 'scruple_run'

/** The passwords of our accounts: by chance, made once, kept where only their owner can read them. */
export function accountsIn(folder: string): Accounts {
  const file = join(folder, 'database.json')
  const known = readJson(file, Accounts)
  if (known) return known
  const accounts = { runPassword: randomBytes(24).toString('hex'), migratePassword: randomBytes(24).toString('hex') }
  writeSecretJson(file, accounts)
  return accounts
}

/**
 * What the server carries out at each start, one statement a line, so that no client program is needed. The run account
 * has no rights here: the migrations grant them table by table. A password is set anew each time, so that a lost
 * database.json only means a new one.
 */
export function initialStatements({ runPassword, migratePassword }: Accounts): string {
  const account = (user: string, password: string): string[] => [
    `CREATE USER IF NOT EXISTS '${user}'@'127.0.0.1';`,
    `ALTER USER '${user}'@'127.0.0.1' IDENTIFIED BY '${password}';`,
  ]
  return [
    `CREATE DATABASE IF NOT EXISTS ${DATABASE} CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_ci;`,
    ...account(MIGRATE_USER, migratePassword),
    `GRANT ALL PRIVILEGES ON ${DATABASE}.* TO '${MIGRATE_USER}'@'127.0.0.1' WITH GRANT OPTION;`,
    ...account(RUN_USER, runPassword),
    '',
  ].join('\n')
}

/** The settings of `server/config.ts` that lead to this database. */
export function databaseEnvironment(port: number, { runPassword, migratePassword }: Accounts): Record<string, string> {
  return {
    DATABASE_HOST: '127.0.0.1',
    DATABASE_PORT: String(port),
    DATABASE_NAME: DATABASE,
    DATABASE_RUN_USER: RUN_USER,
    DATABASE_RUN_PASSWORD: runPassword,
    DATABASE_MIGRATE_USER: MIGRATE_USER,
    DATABASE_MIGRATE_PASSWORD: migratePassword,
  }
}
