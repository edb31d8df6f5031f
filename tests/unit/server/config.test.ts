import { describe, expect, test } from 'vitest'
import { ConfigError, loadConfig } from '#server/config.ts'

const KEY = '9f1c0b7a54e2d86318ca0f7be4952d6041b8e37fa29c5d10e6b4738d2f05ac91'
const OTHER_KEY = 'Zk3v9QwXr1TtYb6NmLp0JhGfDs8AaEeUuIiOoCcVvBB'

const local = {
  DATABASE_PORT: '33061',
  DATABASE_RUN_USER: 'scruple_run',
  DATABASE_RUN_PASSWORD: 'b41f7c20d9e86a35',
  DATABASE_MIGRATE_USER: 'scruple_migrate',
  DATABASE_MIGRATE_PASSWORD: '70e2ac95f13b8d64',
  ACCESS_TOKEN_KEYS: KEY,
}
const production = {
  ...local,
  NODE_ENV: 'production',
  PUBLIC_ORIGIN: 'https://weights.example',
  SMTP_HOST: 'mail.example',
  MAIL_FROM: 'Scruple <weights@site.example>',
}

function refusal(env: Record<string, string | undefined>): string {
  try {
    loadConfig(env)
  } catch (error) {
    expect(error).toBeInstanceOf(ConfigError)
    return (error as ConfigError).message
  }
  throw new Error('The configuration was taken.')
}

describe('every setting that is wrong stops the start with a sentence that names it', () => {
  test.each([
    ['NODE_ENV', 'staging', 'development, production or test, but is "staging"'],
    ['HOST', '', 'HOST is empty'],
    ['PORT', 'abc', 'a port number from 1 to 65535, but is "abc"'],
    ['PORT', '', 'but is ""'],
    ['PORT', '0', 'but is "0"'],
    ['PORT', '65536', 'but is "65536"'],
    ['PORT', '43.5', 'but is "43.5"'],
    ['PORT', '0x10', 'but is "0x10"'],
    ['PORT', '-1', 'but is "-1"'],
    ['PUBLIC_ORIGIN', 'weights.example', 'an address such as https://weights.example'],
    ['PUBLIC_ORIGIN', 'https://weights.example/app', 'without a path, but is "https://weights.example/app"'],
    ['PUBLIC_ORIGIN', 'ftp://weights.example', 'but is "ftp://weights.example"'],
    ['TRUST_PROXY', 'true', 'the addresses of proxies'],
    ['TRUST_PROXY', '1', 'but is "1"'],
    ['TRUST_PROXY', '10.0.0.0/33', 'but is "10.0.0.0/33"'],
    ['TRUST_PROXY', '10.0.0.5, balancer', 'but is "10.0.0.5, balancer"'],
    ['DATABASE_HOST', '', 'DATABASE_HOST is empty'],
    ['DATABASE_PORT', 'mysql', 'but is "mysql"'],
    ['DATABASE_NAME', 'scruple; DROP', 'letters, digits and underscores'],
    ['DATABASE_RUN_USER', undefined, 'DATABASE_RUN_USER is missing'],
    ['DATABASE_RUN_PASSWORD', undefined, 'DATABASE_RUN_PASSWORD is missing'],
    ['DATABASE_RUN_PASSWORD', '', 'DATABASE_RUN_PASSWORD is empty'],
    ['DATABASE_MIGRATE_USER', undefined, 'DATABASE_MIGRATE_USER is missing'],
    ['DATABASE_MIGRATE_PASSWORD', undefined, 'DATABASE_MIGRATE_PASSWORD is missing'],
    ['DATABASE_SSL', 'on', 'true or false, but is "on"'],
    ['ACCESS_TOKEN_KEYS', undefined, 'ACCESS_TOKEN_KEYS is missing'],
    ['ACCESS_TOKEN_KEYS', KEY.slice(0, 40), '32 random bytes'],
    ['ACCESS_TOKEN_KEYS', `${KEY},short`, '32 random bytes'],
    ['ACCESS_TOKEN_KEYS', `${KEY},`, '32 random bytes'],
    ['DEMO', 'yes', 'true or false, but is "yes"'],
    ['DATA_DIRECTORY', '', 'DATA_DIRECTORY is empty'],
    ['SMTP_HOST', '', 'SMTP_HOST is empty'],
    ['SMTP_PORT', '99999', 'but is "99999"'],
    ['SMTP_SECURE', '1', 'true or false, but is "1"'],
    ['SMTP_USER', 'sender', 'SMTP_USER and SMTP_PASSWORD belong together'],
    ['SMTP_PASSWORD', 'x', 'SMTP_USER and SMTP_PASSWORD belong together'],
    ['MAIL_FROM', 'Scruple', 'a mail address, but is "Scruple"'],
    ['MAIL_CATCHER', 'TRUE', 'true or false, but is "TRUE"'],
    ['LOG_LEVEL', 'loud', 'fatal, error, warn, info, debug or silent, but is "loud"'],
  ])('%s = %j', (name, value, words) => {
    const sentence = refusal({ ...local, [name]: value })
    expect(sentence).toContain(name)
    expect(sentence).toContain(words)
    expect(sentence).not.toContain('\n')
  })

  test('a secret that is refused is not repeated', () => {
    const secret = 'not-a-key-but-nobody-should-read-it'
    expect(refusal({ ...local, ACCESS_TOKEN_KEYS: secret })).not.toContain(secret)
    expect(refusal({ ...production, DATABASE_RUN_PASSWORD: 'tiny-one' })).not.toContain('tiny-one')
  })

  test('the demo is refused on an address that others can reach', () => {
    expect(refusal({ ...local, DEMO: 'true', HOST: '0.0.0.0' })).toMatch(/^DEMO is for this machine alone.*0\.0\.0\.0/)
  })

  test('mail is caught or sent, not both', () => {
    expect(refusal({ ...local, MAIL_CATCHER: 'true', SMTP_HOST: 'mail.example' })).toMatch(/^MAIL_CATCHER must be false/)
  })
})

describe('production refuses', () => {
  test.each([
    ['the demo', { DEMO: 'true' }, 'DEMO'],
    ['the mail catcher', { MAIL_CATCHER: 'true', SMTP_HOST: undefined }, 'MAIL_CATCHER'],
    ['to keep signals to itself', { SMTP_HOST: undefined }, 'SMTP_HOST is missing'],
    ['mail without a sender', { MAIL_FROM: undefined }, 'MAIL_FROM is missing'],
    ['an address without TLS', { PUBLIC_ORIGIN: 'http://weights.example' }, 'PUBLIC_ORIGIN must be an https address'],
    ['no address', { PUBLIC_ORIGIN: undefined }, 'PUBLIC_ORIGIN must be an https address'],
    ['a key of one character', { ACCESS_TOKEN_KEYS: 'a'.repeat(64) }, 'ACCESS_TOKEN_KEYS looks like an example'],
    ['a key of a repeated pattern', { ACCESS_TOKEN_KEYS: '0123456789abcdef'.repeat(4) }, 'ACCESS_TOKEN_KEYS looks like an example'],
    [
      'a second key from an example',
      { ACCESS_TOKEN_KEYS: `${KEY},please_change_me_please_change_me_please_change` },
      'ACCESS_TOKEN_KEYS looks like',
    ],
    ['a short database password', { DATABASE_RUN_PASSWORD: 'b41f7c20' }, 'DATABASE_RUN_PASSWORD is too short'],
    [
      'a database password from an example',
      { DATABASE_MIGRATE_PASSWORD: 'change-me-before-use' },
      'DATABASE_MIGRATE_PASSWORD is too short or looks like',
    ],
    ['one account for both tasks', { DATABASE_RUN_USER: 'scruple', DATABASE_MIGRATE_USER: 'scruple' }, 'two accounts'],
    ['a far database in the clear', { DATABASE_HOST: 'db.example' }, 'DATABASE_SSL must be true'],
  ])('%s', (_what, change, words) => {
    expect(refusal({ ...production, ...change })).toContain(words)
  })
})

describe('what is taken', () => {
  test('a local environment, with its defaults', () => {
    expect(loadConfig(local)).toEqual({
      environment: 'development',
      http: { host: '127.0.0.1', port: 4310, publicOrigin: undefined, trustProxy: false },
      database: {
        host: '127.0.0.1',
        port: 33_061,
        name: 'scruple',
        ssl: false,
        run: { user: 'scruple_run', password: 'b41f7c20d9e86a35' },
        migrate: { user: 'scruple_migrate', password: '70e2ac95f13b8d64' },
      },
      accessTokenKeys: [KEY],
      isDemo: false,
      dataDirectory: 'var',
      smtp: undefined,
      mailFrom: 'Scruple <scruple@localhost>',
      isMailCatcherOn: false,
      logLevel: 'warn',
    })
  })

  test('a production environment, each value in its own place', () => {
    const env = {
      ...production,
      HOST: '0.0.0.0',
      PORT: '8443',
      TRUST_PROXY: 'loopback, 10.1.0.0/16, fd00::1',
      DATABASE_HOST: 'db.example',
      DATABASE_NAME: 'weights',
      DATABASE_SSL: 'true',
      ACCESS_TOKEN_KEYS: `${KEY}, ${OTHER_KEY}`,
      DATA_DIRECTORY: '/srv/scruple',
      SMTP_PORT: '465',
      SMTP_SECURE: 'true',
      SMTP_USER: 'sender',
      SMTP_PASSWORD: 'c3a9e17b',
      LOG_LEVEL: 'info',
    }
    expect(loadConfig(env)).toEqual({
      environment: 'production',
      http: { host: '0.0.0.0', port: 8443, publicOrigin: 'https://weights.example', trustProxy: 'loopback, 10.1.0.0/16, fd00::1' },
      database: {
        host: 'db.example',
        port: 33_061,
        name: 'weights',
        ssl: true,
        run: { user: 'scruple_run', password: 'b41f7c20d9e86a35' },
        migrate: { user: 'scruple_migrate', password: '70e2ac95f13b8d64' },
      },
      accessTokenKeys: [KEY, OTHER_KEY],
      isDemo: false,
      dataDirectory: '/srv/scruple',
      smtp: { host: 'mail.example', port: 465, isSecure: true, user: 'sender', password: 'c3a9e17b' },
      mailFrom: 'Scruple <weights@site.example>',
      isMailCatcherOn: false,
      logLevel: 'info',
    })
  })

  test('the demo on this machine, with mail caught', () => {
    const config = loadConfig({ ...local, DEMO: 'true', MAIL_CATCHER: 'true' })
    expect([config.isDemo, config.isMailCatcherOn, config.smtp]).toEqual([true, true, undefined])
  })
})
