import { z } from 'zod'

const flag = (name: string) => z.enum(['true', 'false'], { error: `${name} must be true or false.` }).transform((word) => word === 'true')

const port = (name: string) =>
  z.coerce
    .number({ error: `${name} must be a port number.` })
    .int()
    .min(1, `${name} must be 1 or more.`)
    .max(65_535, `${name} must be 65535 or less.`)

const text = (name: string) => z.string({ error: `${name} is missing.` }).min(1, `${name} is empty.`)

/** At least 256 bits, written in hexadecimal or base64url (RFC 7518 for HS256). */
const KEY = /^(?:[0-9a-f]{64,}|[A-Za-z0-9_-]{43,})$/

const Environment = z.object({
  NODE_ENV: z
    .enum(['development', 'production', 'test'], { error: 'NODE_ENV must be development, production or test.' })
    .default('development'),
  HOST: z.string().default('127.0.0.1'),
  PORT: port('PORT').default(4310),
  PUBLIC_ORIGIN: z.url({ error: 'PUBLIC_ORIGIN must be an address such as https://weights.example.' }).optional(),
  TRUST_PROXY: z.string().optional(),
  DATABASE_HOST: text('DATABASE_HOST').default('127.0.0.1'),
  DATABASE_PORT: port('DATABASE_PORT').default(3306),
  DATABASE_NAME: text('DATABASE_NAME').regex(/^\w+$/, 'DATABASE_NAME may hold letters, digits and underscores only.').default('scruple'),
  DATABASE_RUN_USER: text('DATABASE_RUN_USER'),
  DATABASE_RUN_PASSWORD: text('DATABASE_RUN_PASSWORD'),
  DATABASE_MIGRATE_USER: text('DATABASE_MIGRATE_USER'),
  DATABASE_MIGRATE_PASSWORD: text('DATABASE_MIGRATE_PASSWORD'),
  DATABASE_SSL: flag('DATABASE_SSL').default(false),
  ACCESS_TOKEN_KEYS: text('ACCESS_TOKEN_KEYS')
    .transform((list) => list.split(',').map((key) => key.trim()))
    .refine(
      (keys) => keys.every((key) => KEY.test(key)),
      'ACCESS_TOKEN_KEYS must hold keys of at least 32 random bytes each, in hexadecimal or base64url, with commas between.',
    ),
  DEMO: flag('DEMO').default(false),
  DATA_DIRECTORY: text('DATA_DIRECTORY').default('var'),
  SMTP_HOST: text('SMTP_HOST').optional(),
  SMTP_PORT: port('SMTP_PORT').default(587),
  SMTP_USER: z.string().optional(),
  SMTP_PASSWORD: z.string().optional(),
  SMTP_SECURE: flag('SMTP_SECURE').default(false),
  MAIL_FROM: text('MAIL_FROM').default('Scruple <scruple@localhost>'),
  MAIL_CATCHER: flag('MAIL_CATCHER').default(false),
  LOG_LEVEL: z
    .enum(['fatal', 'error', 'warn', 'info', 'debug', 'silent'], { error: 'LOG_LEVEL must be fatal, error, warn, info, debug or silent.' })
    .default('warn'),
})
type Environment = z.output<typeof Environment>

const LOOPBACK = new Set(['127.0.0.1', '::1', 'localhost'])
const EXAMPLE_SECRET = /change|example|secret|password|^(.)\1+$/i

/** A setting that does not let the program start; the sentence names it. */
export class ConfigError extends Error {
  override readonly name = 'ConfigError'
}

/** Everything that the program is told from outside. */
export interface Config {
  environment: 'development' | 'production' | 'test'
  http: { host: string; port: number; publicOrigin: string | undefined; trustProxy: string | false }
  database: {
    host: string
    port: number
    name: string
    ssl: boolean
    run: { user: string; password: string }
    migrate: { user: string; password: string }
  }
  accessTokenKeys: readonly string[]
  isDemo: boolean
  dataDirectory: string
  smtp: { host: string; port: number; isSecure: boolean; user: string | undefined; password: string | undefined } | undefined
  mailFrom: string
  isMailCatcherOn: boolean
  logLevel: string
}

function productionProblem(values: Environment): string | undefined {
  if (values.DEMO) return 'DEMO cannot be true in production.'
  if (values.MAIL_CATCHER) return 'MAIL_CATCHER cannot be true in production.'
  if (values.SMTP_HOST === undefined) return 'SMTP_HOST is missing: action-limit signals are mailed in production.'
  if (values.PUBLIC_ORIGIN?.startsWith('https://') !== true) return 'PUBLIC_ORIGIN must be an https address in production.'
  if (values.ACCESS_TOKEN_KEYS.some((key) => EXAMPLE_SECRET.test(key)))
    return 'ACCESS_TOKEN_KEYS looks like an example; make one with `openssl rand -hex 32`.'
  for (const name of ['DATABASE_RUN_PASSWORD', 'DATABASE_MIGRATE_PASSWORD'] as const) {
    if (values[name].length < 16 || EXAMPLE_SECRET.test(values[name])) return `${name} is too short or looks like an example.`
  }
  if (values.DATABASE_RUN_USER === values.DATABASE_MIGRATE_USER) return 'DATABASE_RUN_USER and DATABASE_MIGRATE_USER must be two accounts.'
  return undefined
}

function problemOf(values: Environment): string | undefined {
  if (values.DEMO && !LOOPBACK.has(values.HOST)) return `DEMO is for this machine alone: HOST must be 127.0.0.1, but is ${values.HOST}.`
  return values.NODE_ENV === 'production' ? productionProblem(values) : undefined
}

/**
 * Reads the configuration from the environment.
 * @throws {ConfigError} with one sentence that names the variable at fault
 */
export function loadConfig(env: Readonly<Record<string, string | undefined>>): Config {
  const parsed = Environment.safeParse(env)
  if (!parsed.success) {
    const [issue] = parsed.error.issues
    const name = String(issue?.path[0] ?? '')
    throw new ConfigError(issue && issue.message.includes(name) ? issue.message : `${name}: ${issue?.message ?? 'is wrong'}`)
  }
  const values = parsed.data
  const problem = problemOf(values)
  if (problem !== undefined) throw new ConfigError(problem)
  return {
    environment: values.NODE_ENV,
    http: { host: values.HOST, port: values.PORT, publicOrigin: values.PUBLIC_ORIGIN, trustProxy: values.TRUST_PROXY ?? false },
    database: {
      host: values.DATABASE_HOST,
      port: values.DATABASE_PORT,
      name: values.DATABASE_NAME,
      ssl: values.DATABASE_SSL,
      run: { user: values.DATABASE_RUN_USER, password: values.DATABASE_RUN_PASSWORD },
      migrate: { user: values.DATABASE_MIGRATE_USER, password: values.DATABASE_MIGRATE_PASSWORD },
    },
    accessTokenKeys: values.ACCESS_TOKEN_KEYS,
    isDemo: values.DEMO,
    dataDirectory: values.DATA_DIRECTORY,
    smtp: values.SMTP_HOST === undefined ? undefined : smtpOf(values, values.SMTP_HOST),
    mailFrom: values.MAIL_FROM,
    isMailCatcherOn: values.MAIL_CATCHER,
    logLevel: values.LOG_LEVEL,
  }
}

function smtpOf(values: Environment, host: string): NonNullable<Config['smtp']> {
  return { host, port: values.SMTP_PORT, isSecure: values.SMTP_SECURE, user: values.SMTP_USER, password: values.SMTP_PASSWORD }
}
