import { open } from 'node:fs/promises'
import { BalanceFileMapping } from '#shared/schemas/balance-files.ts'
import {
  WeighingFileReport,
  type UploadWeighingFile,
  type WeighingFileAnswer,
  type WeighingFilePreviewed,
} from '#shared/schemas/weighing-files.ts'
import type { Permission } from '#shared/permissions.ts'
import { previewBalanceFile } from '../../balance-files/preview.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { ConflictError, InvalidFieldError, NotFoundError } from '../../errors.ts'
import { requirePermission, type Actor } from '../../http/actor.ts'
import type { UploadedFile } from '../../http/endpoint.ts'
import { Machine } from '../../models/machine.ts'
import { Sample } from '../../models/sample.ts'
import { Site } from '../../models/site.ts'
import { WeighingFile } from '../../models/weighing-file.ts'
import { appendAudit, chainOf } from '../audit.ts'
import { findBatch } from '../batches/find-batch.ts'
import { requireBatchState } from '../batches/run-batch.ts'
import { requireUsableBalance } from '../samples/open-sample.ts'
import { userNames } from '../user-names.ts'
import { hashOfFile, storeBytes } from './stored-bytes.ts'

const HEAD_BYTES = 200_000

/** The file, if the actor may do this at its site. */
export async function findFile(actor: Actor, permission: Permission, id: string): Promise<WeighingFile> {
  const file = await WeighingFile.findByPk(id)
  if (!file) throw new NotFoundError('balance file', id)
  requirePermission(actor, permission, { siteId: file.siteId, kind: 'balance file', id })
  return file
}

/** Refuses bytes that were taken already, naming where. */
export async function refuseSecondTime(siteId: string, sha256: string): Promise<void> {
  const first = await WeighingFile.findOne({ where: { siteId, publishedSha256: sha256 } })
  if (!first) return
  throw new ConflictError(
    'file-already-published',
    `This file was taken already on ${first.publishedAt?.toISOString() ?? ''}, as “${first.name}”. Nothing was recorded.`,
    {
      weighingFileId: first.id,
      batchId: first.batchId,
    },
  )
}

/** A stored file as clients see it. */
export async function presentFile(file: WeighingFile): Promise<WeighingFileAnswer> {
  const names = await userNames([file.uploadedById])
  const samples = await Sample.findAll({
    where: { weighingFileId: file.id, state: 'complete' },
    attributes: ['id'],
    order: [['sequence', 'ASC']],
  })
  const { id, batchId, balanceId, name, sizeBytes, sha256, state } = file
  return {
    ...{ id, batchId, balanceId, name, sizeBytes, sha256, state },
    uploadedBy: names.get(file.uploadedById) ?? '',
    uploadedAt: file.uploadedAt.toISOString(),
    publishedAt: file.publishedAt?.toISOString() ?? null,
    mapping: file.mapping === null ? null : BalanceFileMapping.parse(file.mapping),
    report: file.report === null ? null : WeighingFileReport.parse(file.report),
    sampleIds: samples.map((sample) => sample.id),
  }
}

async function headOf(path: string): Promise<Uint8Array> {
  const handle = await open(path)
  try {
    const { buffer, bytesRead } = await handle.read(Buffer.alloc(HEAD_BYTES), 0, HEAD_BYTES, 0)
    return buffer.subarray(0, bytesRead)
  } finally {
    await handle.close()
  }
}

/** Takes a balance file in, bytes and hash, and shows how it seems to read. No weight counts before it is published. */
export async function uploadFile(
  actor: Actor,
  { batchId, balanceId }: UploadWeighingFile,
  upload: UploadedFile | undefined,
): Promise<WeighingFilePreviewed> {
  if (!upload) throw new InvalidFieldError('/file', 'Send the balance file in the field “file”.')
  if (upload.sizeBytes === 0)
    throw new InvalidFieldError('/file', `“${upload.originalName}” is empty: 0 bytes were found, a file of weights was expected.`)
  const sha256 = await hashOfFile(upload.path)
  const head = await headOf(upload.path)
  return inTransaction(async () => {
    const batch = await findBatch(actor, 'weighing-file:import', batchId)
    requireBatchState(batch, ['running', 'ended'], 'taking a balance file')
    const now = new Date()
    const { balance } = await requireUsableBalance(batch.siteId, balanceId, now)
    await refuseSecondTime(batch.siteId, sha256)
    const machine = await Machine.findByPk(batch.machineId, { rejectOnEmpty: true })
    const site = await Site.findByPk(batch.siteId, { rejectOnEmpty: true })
    const known = BalanceFileMapping.safeParse(balance.fileMapping)
    const preview = await previewBalanceFile(head, {
      now,
      positions: machine.boresPerGroup,
      segments: machine.segments,
      readabilityMg: balance.readabilityMg,
      timeZone: site.timeZone,
      mapping: known.success ? known.data : undefined,
    })
    const file = await WeighingFile.create({
      siteId: batch.siteId,
      batchId,
      balanceId,
      name: upload.originalName.slice(0, 255),
      sizeBytes: upload.sizeBytes,
      sha256,
      uploadedById: actor.userId,
      uploadedAt: now,
    })
    await storeBytes(file.id, upload.path)
    await appendAudit({
      actor,
      chain: chainOf.batch(batchId),
      action: 'weighing-file:upload',
      record: { kind: 'weighing-file', id: file.id },
      new: { name: file.name, sizeBytes: file.sizeBytes, sha256 },
    })
    return { file: await presentFile(file), preview }
  })
}
