import { QueryTypes, type Sequelize } from 'sequelize'
import { SequelizeStorage, Umzug } from 'umzug'
import type { Config } from '../config.ts'
import * as audit from '../migrations/0001-audit.ts'
import * as people from '../migrations/0002-people.ts'
import * as masters from '../migrations/0003-masters.ts'
import * as runs from '../migrations/0004-runs.ts'
import * as weighings from '../migrations/0005-weighings.ts'
import * as release from '../migrations/0006-release.ts'
import * as review from '../migrations/0007-review-and-delivery.ts'
import type { Migration, MigrationContext } from '../migrations/migration.ts'
import { openPool } from './database.ts'
import { grantRunAccount } from './grants.ts'

const MIGRATIONS: readonly (readonly [string, { up: Migration }])[] = [
  ['0001-audit', audit],
  ['0002-people', people],
  ['0003-masters', masters],
  ['0004-runs', runs],
  ['0005-weighings', weighings],
  ['0006-release', release],
  ['0007-review-and-delivery', review],
]

const LEASE_TABLE = `CREATE TABLE IF NOT EXISTS migration_lease (id TINYINT NOT NULL PRIMARY KEY, held_until DATETIME(3) NOT NULL)`

/** One instance at a time: a lease row that a killed instance loses after a minute (named locks do not reach over a cluster). */
async function withLease(sequelize: Sequelize, work: () => Promise<void>): Promise<void> {
  await sequelize.query(LEASE_TABLE)
  await sequelize.query(`INSERT IGNORE INTO migration_lease VALUES (1, '2000-01-01')`)
  for (;;) {
    const [, taken] = await sequelize.query(
      `UPDATE migration_lease SET held_until = NOW(3) + INTERVAL 60 SECOND WHERE id = 1 AND held_until < NOW(3)`,
      { type: QueryTypes.UPDATE },
    )
    if (taken > 0) break
    await new Promise((resolve) => setTimeout(resolve, 200))
  }
  try {
    await work()
  } finally {
    await sequelize.query(`UPDATE migration_lease SET held_until = '2000-01-01' WHERE id = 1`)
  }
}

/** Brings the schema to the newest version and gives the run account exactly the rights it needs, table by table. */
export async function migrate(config: Config['database']): Promise<void> {
  const sequelize = openPool(config, config.migrate, 2)
  const context: MigrationContext = {
    run: async (sql) => {
      await sequelize.query(sql)
    },
  }
  const umzug = new Umzug({
    migrations: MIGRATIONS.map(([name, { up }]) => ({ name, up: () => up(context) })),
    context,
    storage: new SequelizeStorage({ sequelize, tableName: 'migrations' }),
    logger: undefined,
  })
  try {
    await withLease(sequelize, async () => {
      const known = new Set(MIGRATIONS.map(([name]) => name))
      const newer = (await umzug.executed()).filter(({ name }) => !known.has(name))
      if (newer.length > 0)
        throw new Error(`The database is newer than this program: it knows ${newer.map(({ name }) => name).join(', ')}.`)
      await umzug.up()
      await grantRunAccount(sequelize, config)
    })
  } finally {
    await sequelize.close()
  }
}
