import packageJson from '../../../package.json' with { type: 'json' }
import { inTransaction } from '../../database/in-transaction.ts'
import type { Actor } from '../../http/actor.ts'
import { AuditChain } from '../../models/audit-chain.ts'
import { AuditEntry } from '../../models/audit-entry.ts'
import type { Batch } from '../../models/batch.ts'
import { Site } from '../../models/site.ts'
import { printBatchRecord } from '../../pdf/batch-record-pdf.ts'
import { appendAudit, chainOf } from '../audit.ts'
import { findBatch } from '../batches/find-batch.ts'
import { contentHash } from '../signatures.ts'
import { readBatchRecord } from './batch-record.ts'
import { releaseChecklist } from './checklist.ts'
import { listDispositions } from './decide-batch.ts'

const fileName = ({ number }: Batch, ending: string): string => `batch-${number.replace(/[^\w.-]+/g, '-')}.${ending}`

async function noteExport(actor: Actor, batch: Batch, form: string): Promise<void> {
  await inTransaction(() =>
    appendAudit({ actor, chain: chainOf.batch(batch.id), action: 'batch:export', record: { kind: 'batch', id: batch.id }, new: { form } }),
  )
}

/** The batch record as a PDF; that it was made is in the audit trail. */
export async function printRecord(actor: Actor, batchId: string, isDemo: boolean): Promise<{ name: string; content: Buffer }> {
  const batch = await findBatch(actor, 'record:read', batchId)
  const record = await readBatchRecord(batch)
  const site = await Site.findByPk(batch.siteId, { rejectOnEmpty: true })
  const head = await AuditChain.findByPk(chainOf.batch(batchId))
  const content = await printBatchRecord({
    record,
    checklist: releaseChecklist(record),
    dispositions: await listDispositions(batchId),
    contentHash: contentHash(record),
    chainHead: head ? `${head.sequence} ${head.hash}` : 'none',
    timeZone: site.timeZone,
    isDemo,
  })
  await noteExport(actor, batch, 'pdf')
  return { name: fileName(batch, 'pdf'), content }
}

/** The batch record with its decisions and audit entries as one file, from which figures and hashes can be worked out again. */
export async function exportRecord(actor: Actor, batchId: string): Promise<{ name: string; content: Buffer }> {
  const batch = await findBatch(actor, 'record:read', batchId)
  const record = await readBatchRecord(batch)
  const entries = await AuditEntry.findAll({ where: { chain: chainOf.batch(batchId) }, order: [['sequence', 'ASC']] })
  const whole = {
    record,
    contentHash: contentHash(record),
    dispositions: await listDispositions(batchId),
    audit: entries.map((entry) => entry.toJSON()),
    program: `Scruple ${packageJson.version}`,
  }
  await noteExport(actor, batch, 'json')
  return { name: fileName(batch, 'json'), content: Buffer.from(JSON.stringify(whole, null, 1)) }
}
