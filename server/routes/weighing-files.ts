import { Readable } from 'node:stream'
import { z } from 'zod'
import { Id } from '#shared/schemas/field.ts'
import { PublishWeighingFile, UploadWeighingFile, WeighingFileAnswer, WeighingFilePreviewed } from '#shared/schemas/weighing-files.ts'
import { endpoint } from '../http/endpoint.ts'
import { FileAnswer } from '../http/file-answer.ts'
import { publishFile } from '../services/weighing-files/publish-file.ts'
import { readBytes } from '../services/weighing-files/stored-bytes.ts'
import { findFile, presentFile, uploadFile } from '../services/weighing-files/upload-file.ts'

const WeighingFileId = z.object({ weighingFileId: Id })
const MAX_BYTES = 100_000_000

/** Balance files: taken in with their bytes, read by a confirmed mapping, all or nothing. */
export const weighingFileEndpoints = [
  endpoint({
    method: 'post',
    path: '/weighing-files',
    summary: 'Upload a balance file and see how it reads',
    allow: 'weighing-file:import',
    upload: { maxBytes: MAX_BYTES },
    body: UploadWeighingFile,
    answer: { status: 201, schema: WeighingFilePreviewed },
    problems: [404, 409, 413],
    handle: ({ actor, body, file }) => uploadFile(actor, body, file),
  }),
  endpoint({
    method: 'get',
    path: '/weighing-files/:weighingFileId',
    summary: 'One balance file and what became of it',
    allow: 'record:read',
    params: WeighingFileId,
    answer: { status: 200, schema: WeighingFileAnswer },
    problems: [404],
    handle: async ({ actor, params }) => presentFile(await findFile(actor, 'record:read', params.weighingFileId)),
  }),
  endpoint({
    method: 'get',
    path: '/weighing-files/:weighingFileId/original',
    summary: 'The original bytes',
    allow: 'record:read',
    params: WeighingFileId,
    answer: { status: 200, file: 'application/octet-stream' },
    problems: [404],
    handle: async ({ actor, params }) => {
      const { id, name } = await findFile(actor, 'record:read', params.weighingFileId)
      return new FileAnswer({ name, mediaType: 'application/octet-stream', content: Readable.from(readBytes(id)) })
    },
  }),
  endpoint({
    method: 'post',
    path: '/weighing-files/:weighingFileId/publication',
    summary: 'Take the weights of a balance file',
    allow: 'weighing-file:import',
    idempotent: true,
    params: WeighingFileId,
    body: PublishWeighingFile,
    answer: { status: 200, schema: WeighingFileAnswer },
    problems: [404, 409],
    handle: ({ actor, params, body }) => publishFile(actor, params.weighingFileId, body),
  }),
]
