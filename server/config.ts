import { isIP } from 'node:net'
import { z } from 'zod'

/** What was given, quoted for the sentence; never used for a secret. */
const but = (given: unknown): string => `but is ${JSON.stringify(given)}.`

function flag(name: string) {
  const words = z.enum(['true', 'false'], { error: ({ input }) => `${name} must be true or false, ${but(input)}` })
  return words.transform((word) => word === 'true')
}

function port(name: string, byDefault: number) {
  const isPort = (digits: string): boolean => /^\d{1,5}$/.test(digits) && Number(digits) >= 1 && Number(digits) <= 65_535
  const error = ({ input }: { input?: unknown }): string => `${name} must be a port number from 1 to 65535, ${but(input)}`
  return z.string().refine(isPort, { error }).transform(Number).default(byDefault)
}

const text = (name: string) => z.string({ error: `${name} is missing.` }).min(1, `${name} is empty.`)

/** At least 256 bits, written in hexadecimal or base64url (RFC 7518 for HS256). */
const KEY = /^(?:[0-9a-f]{64,}|[A-Za-z0-9_-]{43,})$/

const PROXY_WORDS = ['loopback', 'linklocal', 'uniquelocal']
function isProxy(place: string): boolean {
  if (PROXY_WORDS.includes(place)) return true
  const [address = '', bits, ...rest] = place.split('/')
  const most = { 0: -1, 4: 32, 6: 128 }[isIP(address)] ?? -1
  return most > 0 && rest.length === 0 && (bits === undefined || (/^\d{1,3}$/.test(bits) && Number(bits) <= most))
}

/** The address that people type, without a path: what a request's origin is compared with. */
function isOrigin(address: string): boolean {
  return URL.canParse(address) && new URL(address).origin === address && /^https?:/.test(address)
}

const Environment = z.object({
  NODE_ENV: z
    .enum(['development', 'production', 'test'], {
      error: ({ input }) => `NODE_ENV must be development, production or test, ${but(input)}`,
    })
    .default('development'),
  HOST: text('HOST').default('127.0.0.1'),
  PORT: port('PORT', 4310),
  PUBLIC_ORIGIN: z
    .string()
    .refine(isOrigin, {
      error: ({ input }) => `PUBLIC_ORIGIN must be an address such as https://weights.example without a path, ${but(input)}`,
    })
    .optional(),
  TRUST_PROXY: z
    .string()
    .refine((list) => list.split(',').every((place) => isProxy(place.trim())), {
      error: ({ input }) => `TRUST_PROXY must list the addresses of proxies, such as 10.0.0.5 or 10.0.0.0/8 or loopback, ${but(input)}`,
    })
    .optional(),
  DATABASE_HOST: text('DATABASE_HOST').default('127.0.0.1'),
  DATABASE_PORT: port('DATABASE_PORT', 3306),
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
  SMTP_PORT: port('SMTP_PORT', 587),
  SMTP_USER: text('SMTP_USER').optional(),
  SMTP_PASSWORD: text('SMTP_PASSWORD').optional(),
  SMTP_SECURE: flag('SMTP_SECURE').default(false),
  MAIL_FROM: text('MAIL_FROM')
    .regex(/^[^@<>]*<?[^@<>\s]+@[^@<>\s]+>?$/, { error: ({ input }) => `MAIL_FROM must hold a mail address, ${but(input)}` })
    .optional(),
  MAIL_CATCHER: flag('MAIL_CATCHER').default(false),
  LOG_LEVEL: z
    .enum(['fatal', 'error', 'warn', 'info', 'debug', 'silent'], {
      error: ({ input }) => `LOG_LEVEL must be fatal, error, warn, info, debug or silent, ${but(input)}`,
    })
    .default('warn'),
})
type Environment = z.output<typeof Environment>

const LOOPBACK = new Set(['127.0.0.1', '::1', 'localhost'])
const LOCAL_SENDER = 'Scruple <scruple@localhost>'
/** Words that stand in examples, and short patterns typed again and again. */
const EXAMPLE_SECRET = /change|example|secret|password|^(.{1,32})\1+$/i

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

/** What production refuses, the first that applies. */
function productionProblem(values: Environment): string | undefined {
  if (values.DEMO) return 'DEMO cannot be true in production.'
  if (values.MAIL_CATCHER) return 'MAIL_CATCHER cannot be true in production.'
  if (values.SMTP_HOST === undefined) return 'SMTP_HOST is missing: action-limit signals are mailed in production.'
  if (values.MAIL_FROM === undefined) return 'MAIL_FROM is missing: mail needs a sender in production.'
  if (values.PUBLIC_ORIGIN?.startsWith('https://') !== true) return 'PUBLIC_ORIGIN must be an https address in production.'
  if (values.ACCESS_TOKEN_KEYS.some((key) => EXAMPLE_SECRET.test(key)))
    return 'ACCESS_TOKEN_KEYS looks like an example; make one with `openssl rand -hex 32`.'
  return databaseProblem(values)
}

function databaseProblem(values: Environment): string | undefined {
  for (const name of ['DATABASE_RUN_PASSWORD', 'DATABASE_MIGRATE_PASSWORD'] as const) {
    if (values[name].length < 16 || EXAMPLE_SECRET.test(values[name])) return `${name} is too short or looks like an example.`
  }
  if (values.DATABASE_RUN_USER === values.DATABASE_MIGRATE_USER) return 'DATABASE_RUN_USER and DATABASE_MIGRATE_USER must be two accounts.'
  if (!values.DATABASE_SSL && !LOOPBACK.has(values.DATABASE_HOST))
    return `DATABASE_SSL must be true in production when the database is on another machine (DATABASE_HOST is ${values.DATABASE_HOST}).`
  return undefined
}

function problemOf(values: Environment): string | undefined {
  if (values.DEMO && !LOOPBACK.has(values.HOST)) return `DEMO is for this machine alone: HOST must be 127.0.0.1, but is ${values.HOST}.`
  if ((values.SMTP_USER === undefined) !== (values.SMTP_PASSWORD === undefined))
    return 'SMTP_USER and SMTP_PASSWORD belong together: give both or neither.'
  if (values.MAIL_CATCHER && values.SMTP_HOST !== undefined) return 'MAIL_CATCHER must be false when SMTP_HOST says where mail goes.'
  return values.NODE_ENV === 'production' ? productionProblem(values) : undefined
}

/**
 * Reads the configuration from the environment.
 * @throws {ConfigError} with one sentence that names the variable at fault
 */
export function loadConfig(env: Readonly<Record<string, string | undefined>>): Config {
  const parsed = Environment.safeParse(env)
  if (!parsed.success) throw new ConfigError(parsed.error.issues[0]?.message ?? 'The environment does not fit.')
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
    mailFrom: values.MAIL_FROM ?? LOCAL_SENDER,
    isMailCatcherOn: values.MAIL_CATCHER,
    logLevel: values.LOG_LEVEL,
  }
}

function smtpOf(values: Environment, host: string): NonNullable<Config['smtp']> {
  return { host, port: values.SMTP_PORT, isSecure: values.SMTP_SECURE, user: values.SMTP_USER, password: values.SMTP_PASSWORD }
}
