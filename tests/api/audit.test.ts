import { QueryTypes } from 'sequelize'
import { beforeAll, describe, expect, test } from 'vitest'
import { database, openPool } from '#server/database/database.ts'
import { APPEND_ONLY_TABLES } from '#server/database/grants.ts'
import { inTransaction } from '#server/database/in-transaction.ts'
import { AuditEntry } from '#server/models/audit-entry.ts'
import { appendAudit, chainOf } from '#server/services/audit.ts'
import { verifyChain } from '#server/services/verify-audit.ts'
import { buildRun } from '../build.ts'
import { startApi, type Api } from './harness.ts'

let api: Api
beforeAll(async () => {
  api = await startApi()
})

const actor = { userId: null, name: 'the tests', terminal: 'here', requestId: 'none' }
const entry = (chain: string, note: string) => ({ actor, chain, action: 'test', record: { kind: 'note', id: note }, new: { note } })

describe.each(APPEND_ONLY_TABLES)('%s', (table) => {
  test.each([`UPDATE \`${table}\` SET ${table === 'audit_entries' ? 'action' : '`version`'} = '1'`, `DELETE FROM \`${table}\``, `TRUNCATE \`${table}\``, `DROP TABLE \`${table}\``])(
    'refuses the run account: %s',
    async (sql) => {
      await expect(database().query(sql)).rejects.toThrow(/command denied/)
    },
  )
})

test('what fails in a transaction leaves no audit entry', async () => {
  const chain = `test:${crypto.randomUUID()}`
  const failing = inTransaction(async () => {
    await appendAudit(entry(chain, 'never'))
    throw new Error('on purpose')
  })
  await expect(failing).rejects.toThrow('on purpose')
  expect(await AuditEntry.count({ where: { chain } })).toBe(0)
})

test('an audit entry outside a transaction is refused', async () => {
  await expect(appendAudit(entry('test:none', 'x'))).rejects.toThrow('outside a transaction')
})

test('forty entries at once make one chain without a gap', async () => {
  const chain = `test:${crypto.randomUUID()}`
  await Promise.all(Array.from({ length: 40 }, (_, place) => inTransaction(() => appendAudit(entry(chain, `note ${place}`)))))
  expect(await AuditEntry.count({ where: { chain } })).toBe(40)
  expect(await verifyChain(chain)).toBeUndefined()
})

test('one altered byte, a missing entry and a cut tail are found by name and place', async () => {
  const chain = `test:${crypto.randomUUID()}`
  for (const note of ['one', 'two', 'three']) await inTransaction(() => appendAudit(entry(chain, note)))
  const master = openPool(api.config.database, api.config.database.migrate, 1)
  const alter = (sql: string) => master.query(sql, { replacements: { chain }, type: QueryTypes.RAW })
  try {
    await alter(`UPDATE audit_entries SET reason = 'x' WHERE chain = :chain AND sequence = 2`)
    expect(await verifyChain(chain)).toEqual({ chain, sequence: 2, fault: 'hash-differs' })
    await alter(`UPDATE audit_entries SET reason = NULL WHERE chain = :chain AND sequence = 2`)
    expect(await verifyChain(chain)).toBeUndefined()
    await alter(`DELETE FROM audit_entries WHERE chain = :chain AND sequence = 3`)
    expect(await verifyChain(chain)).toMatchObject({ fault: 'head-differs' })
    await alter(`DELETE FROM audit_entries WHERE chain = :chain AND sequence = 1`)
    expect(await verifyChain(chain)).toEqual({ chain, sequence: 1, fault: 'entry-missing' })
  } finally {
    await master.close()
  }
})

test('the chain of a batch holds over its life', async () => {
  const { batch, site } = await buildRun()
  const operator = await api.as(site, 'operator')
  await operator.post(`/api/batches/${batch.id}/events`, { kind: 'refill' })
  await operator.post(`/api/batches/${batch.id}/events`, { kind: 'stop', reason: 'shells' })
  expect(await AuditEntry.count({ where: { chain: chainOf.batch(batch.id) } })).toBe(2)
  expect(await verifyChain(chainOf.batch(batch.id))).toBeUndefined()
})
