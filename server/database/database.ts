import { Sequelize } from 'sequelize'
import type { Config } from '../config.ts'
import { defineModels } from '../models/index.ts'
import './transaction-scope.ts'

let connected: Sequelize | undefined

/** The database that this process is connected to. */
export function database(): Sequelize {
  if (!connected) throw new Error('The database was used before connectDatabase() was called.')
  return connected
}

/** Opens the pool of the run account and binds the models to it. */
export function connectDatabase(config: Config['database']): Sequelize {
  connected = openPool(config, config.run)
  defineModels(connected)
  return connected
}

/** A pool for one account of the database; the caller closes it. */
export function openPool(config: Config['database'], account: { user: string; password: string }, maxConnections = 20): Sequelize {
  return new Sequelize(config.name, account.user, account.password, {
    dialect: 'mariadb',
    host: config.host,
    port: config.port,
    logging: false,
    timezone: '+00:00',
    pool: { max: maxConnections, min: 0, idle: 30_000, acquire: 5_000 },
    dialectOptions: { connectTimeout: 3_000, ...(config.ssl ? { ssl: { rejectUnauthorized: true } } : {}) },
    define: { underscored: true },
  })
}
