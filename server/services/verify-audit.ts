import { AuditChain } from '../models/audit-chain.ts'
import { AuditEntry } from '../models/audit-entry.ts'
import { entryHash, GENESIS_HASH } from './audit.ts'

/** Where a chain does not hold: the entry at which the recomputed hash or the numbering departs from what is stored. */
export interface ChainFault {
  chain: string
  sequence: number
  fault: 'hash-differs' | 'entry-missing' | 'head-differs'
}

/** Recomputes one chain from its first entry and compares it with the stored hashes and the stored head. */
export async function verifyChain(chain: string): Promise<ChainFault | undefined> {
  let hash = GENESIS_HASH
  let sequence = 0
  const entries = await AuditEntry.findAll({ where: { chain }, order: [['sequence', 'ASC']] })
  for (const stored of entries) {
    const { hash: storedHash, ...entry } = stored.get({ plain: true })
    if (entry.sequence !== sequence + 1) return { chain, sequence: sequence + 1, fault: 'entry-missing' }
    hash = entryHash(hash, entry)
    sequence = entry.sequence
    if (hash !== storedHash) return { chain, sequence, fault: 'hash-differs' }
  }
  const head = await AuditChain.findByPk(chain)
  if (head && (head.sequence !== sequence || head.hash !== hash)) return { chain, sequence: head.sequence, fault: 'head-differs' }
  return undefined
}

/** Every fault in every chain; an empty list means that nothing was altered, removed or cut off. */
export async function verifyAudit(): Promise<ChainFault[]> {
  const chains = await AuditChain.findAll({ order: [['chain', 'ASC']] })
  const faults: ChainFault[] = []
  for (const { chain } of chains) {
    const fault = await verifyChain(chain)
    if (fault) faults.push(fault)
  }
  return faults
}
