import { AuditChain } from '../../models/audit-chain.ts'
import { AuditEntry } from '../../models/audit-entry.ts'
import { GENESIS_HASH, sealEntry, type AuditActor, type AuditRecord, type SealedEntry } from '../audit.ts'
import { insertAll } from './insert-all.ts'

/** What the demo writes as terminal and request of its entries, so that nobody takes them for entries of people. */
const DEMO_ORIGIN = { terminal: 'demo scenario', requestId: 'demo' }

export interface DemoPerson {
  id: string
  name: string
}

/**
 * Collects the audit entries of the demo and seals them in one go, chain by chain in the order of their times, exactly
 * as single entries are sealed.
 */
export class AuditBook {
  private readonly entries: { at: Date; record: AuditRecord }[] = []

  /** Notes what a person did, or the program itself where there is none. */
  note(at: Date, person: DemoPerson | null, record: Omit<AuditRecord, 'actor'>): void {
    const actor: AuditActor = person
      ? { userId: person.id, name: person.name, ...DEMO_ORIGIN }
      : { userId: null, name: 'Demo scenario', ...DEMO_ORIGIN }
    this.entries.push({ at, record: { ...record, actor } })
  }

  /** Seals and stores everything noted, each chain from its present head. */
  async store(): Promise<void> {
    const before = await AuditChain.findAll({ where: { chain: [...new Set(this.entries.map(({ record }) => record.chain))] }, lock: true })
    const heads = new Map(before.map(({ chain, sequence, hash }) => [chain, { sequence, hash }]))
    const sealed: SealedEntry[] = []
    for (const { at, record } of this.entries.sort((a, b) => a.at.getTime() - b.at.getTime())) {
      const entry = sealEntry(heads.get(record.chain) ?? { sequence: 0, hash: GENESIS_HASH }, at, record)
      heads.set(record.chain, { sequence: entry.sequence, hash: entry.hash })
      sealed.push(entry)
    }
    await insertAll(AuditEntry, sealed)
    const rows = [...heads].map(([chain, head]) => ({ chain, ...head }))
    const isOld = new Set(before.map(({ chain }) => chain))
    await insertAll(
      AuditChain,
      rows.filter(({ chain }) => !isOld.has(chain)),
    )
    for (const { chain, ...head } of rows) if (isOld.has(chain)) await AuditChain.update(head, { where: { chain } })
  }
}
