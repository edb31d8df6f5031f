import { createHash } from 'node:crypto'
import { QueryTypes } from 'sequelize'
import { database } from '../database/database.ts'
import { currentTransaction } from '../database/transaction-scope.ts'
import type { Actor } from '../http/actor.ts'
import { AuditChain } from '../models/audit-chain.ts'
import { AuditEntry } from '../models/audit-entry.ts'
import { canonicalJson } from './canonical-json.ts'

/** Domain separation: a hash of an audit entry can never be taken for the hash of anything else. */
const DOMAIN = 'scruple/audit-entry/1'
export const GENESIS_HASH = '0'.repeat(64)

/** The chain of a record: one for each batch, one for each family of records at a site. */
export const chainOf = {
  batch: (batchId: string) => `batch:${batchId}`,
  masters: (siteId: string) => `masters:${siteId}`,
  changeovers: (siteId: string) => `changeovers:${siteId}`,
  balances: (siteId: string) => `balances:${siteId}`,
  reviews: (siteId: string) => `reviews:${siteId}`,
  people: 'people',
  signIns: 'sign-ins',
} as const

/** Who acts when no person does: migrations, the demo, the mail job. */
export type AuditActor =
  Pick<Actor, 'userId' | 'name' | 'terminal' | 'requestId'> | { userId: null; name: string; terminal: string; requestId: string }

export interface AuditRecord {
  actor: AuditActor
  chain: string
  action: string
  record: { kind: string; id: string }
  old?: object
  new?: object
  reason?: string
}

/** An entry as it is hashed and stored. */
export interface SealedEntry {
  chain: string
  sequence: number
  at: Date
  actorId: string | null
  actorName: string
  action: string
  recordKind: string
  recordId: string
  oldValues: object | null
  newValues: object | null
  reason: string | null
  terminal: string
  requestId: string
  hash: string
}

/** The hash of an entry: SHA-256 over the domain, the hash before it and the canonical text of the entry. */
export function entryHash(previousHash: string, entry: Omit<SealedEntry, 'hash'>): string {
  return createHash('sha256')
    .update(`${DOMAIN}\n${previousHash}\n${canonicalJson(entry)}`)
    .digest('hex')
}

/** Makes the next entry of a chain; pure, so that bulk loading seals exactly as single entries do. */
export function sealEntry(
  head: { sequence: number; hash: string },
  at: Date,
  { actor, chain, action, record, old, new: now, reason }: AuditRecord,
): SealedEntry {
  const entry = {
    chain,
    sequence: head.sequence + 1,
    at,
    actorId: actor.userId,
    actorName: actor.name,
    action,
    recordKind: record.kind,
    recordId: record.id,
    oldValues: old ?? null,
    newValues: now ?? null,
    reason: reason ?? null,
    terminal: actor.terminal,
    requestId: actor.requestId,
  }
  return { ...entry, hash: entryHash(head.hash, entry) }
}

/** Locks the head of a chain until the transaction ends, making the chain if it is new. */
async function lockHead(chain: string): Promise<{ sequence: number; hash: string }> {
  const select = `SELECT sequence, hash FROM audit_chains WHERE chain = :chain FOR UPDATE`
  const options = { replacements: { chain, hash: GENESIS_HASH }, type: QueryTypes.SELECT } as const
  const [head] = await database().query<{ sequence: number; hash: string }>(select, options)
  if (head) return head
  await database().query(`INSERT IGNORE INTO audit_chains (chain, sequence, hash) VALUES (:chain, 0, :hash)`, {
    replacements: { chain, hash: GENESIS_HASH },
  })
  const [made] = await database().query<{ sequence: number; hash: string }>(select, options)
  if (!made) throw new Error(`The audit chain ${chain} could not be made.`)
  return made
}

/**
 * Adds one entry to the audit trail in the caller's transaction: the change and its entry are stored together or not
 * at all. The time is the server's.
 */
export async function appendAudit(record: AuditRecord): Promise<SealedEntry> {
  if (!currentTransaction()) throw new Error(`The audit of ${record.action} was written outside a transaction.`)
  const head = await lockHead(record.chain)
  const entry = sealEntry(head, new Date(), record)
  await AuditEntry.create(entry)
  await AuditChain.update({ sequence: entry.sequence, hash: entry.hash }, { where: { chain: record.chain } })
  return entry
}
