import { z } from 'zod'
import { SAMPLE_KINDS, WEIGHING_FILE_STATES } from '../vocabulary.ts'
import { BalanceFileMapping, BalanceFileNote, BalanceFilePreview } from './balance-files.ts'
import { Id, UtcTime } from './field.ts'

export const UploadWeighingFile = z
  .strictObject({ batchId: Id, balanceId: Id })
  .meta({ id: 'UploadWeighingFile', description: 'Which run the file belongs to and which balance wrote it.' })
export type UploadWeighingFile = z.output<typeof UploadWeighingFile>

export const PublishWeighingFile = z
  .strictObject({ mapping: BalanceFileMapping, kind: z.enum(SAMPLE_KINDS).default('routine') })
  .meta({ id: 'PublishWeighingFile', description: 'How the file reads, as a person confirmed it, and what kind of samples it holds.' })
export type PublishWeighingFile = z.output<typeof PublishWeighingFile>

export const WeighingFileReport = z
  .object({ rows: z.int(), samples: z.int(), encoding: z.string(), notes: z.array(BalanceFileNote), noteTotal: z.int() })
  .meta({ id: 'WeighingFileReport', description: 'What was read from a published file.' })
export type WeighingFileReport = z.output<typeof WeighingFileReport>

export const WeighingFileAnswer = z
  .object({
    id: Id,
    batchId: Id,
    balanceId: Id,
    name: z.string(),
    sizeBytes: z.int(),
    sha256: z.string(),
    state: z.enum(WEIGHING_FILE_STATES),
    uploadedBy: z.string(),
    uploadedAt: UtcTime,
    publishedAt: UtcTime.nullable(),
    mapping: BalanceFileMapping.nullable(),
    report: WeighingFileReport.nullable(),
    sampleIds: z.array(Id),
  })
  .meta({ id: 'WeighingFile', description: 'A balance file with its hash and what became of it.' })
export type WeighingFileAnswer = z.output<typeof WeighingFileAnswer>

export const WeighingFilePreviewed = z
  .object({ file: WeighingFileAnswer, preview: BalanceFilePreview })
  .meta({ id: 'WeighingFilePreviewed', description: 'The stored file and how it seems to read.' })
export type WeighingFilePreviewed = z.output<typeof WeighingFilePreviewed>
