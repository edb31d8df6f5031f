import { QueryTypes, type Sequelize } from 'sequelize'
import type { Config } from '../config.ts'

/** What was recorded stays: the run account may add to these tables and read them, nothing else (requirement A10). */
export const APPEND_ONLY_TABLES = [
  'audit_entries',
  'balance_checks',
  'dispositions',
  'machine_events',
  'reviews',
  'shell_weights',
  'signatures',
  'weighing_corrections',
  'weighing_file_chunks',
  'weighings',
] as const

/** Rows that are working memory, not records, and may be cleared when they are old. */
const CLEARABLE_TABLES = ['events', 'idempotency_keys', 'sign_in_throttles', 'user_roles'] as const
const NOT_FOR_THE_PROGRAM = ['migrations', 'migration_lease']

const includes = (list: readonly string[], table: string): boolean => list.includes(table)

function rightsOn(table: string): string {
  if (includes(APPEND_ONLY_TABLES, table)) return 'SELECT, INSERT'
  if (includes(CLEARABLE_TABLES, table)) return 'SELECT, INSERT, UPDATE, DELETE'
  return 'SELECT, INSERT, UPDATE'
}

/** Grants the run account its rights, table by table; nobody but the migrating account may change the schema. */
export async function grantRunAccount(sequelize: Sequelize, config: Config['database']): Promise<void> {
  const tables = await sequelize.query<{ name: string }>(
    `SELECT table_name AS name FROM information_schema.tables WHERE table_schema = DATABASE()`,
    { type: QueryTypes.SELECT },
  )
  const [grantee] = await sequelize.query<{ host: string }>(`SELECT SUBSTRING_INDEX(CURRENT_USER(), '@', -1) AS host`, {
    type: QueryTypes.SELECT,
  })
  const account = `${sequelize.escape(config.run.user)}@${sequelize.escape(grantee?.host ?? '127.0.0.1')}`
  for (const { name } of tables) {
    if (NOT_FOR_THE_PROGRAM.includes(name)) continue
    await sequelize.query(`GRANT ${rightsOn(name)} ON \`${config.name}\`.\`${name}\` TO ${account}`)
  }
}
