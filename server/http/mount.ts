import { unlink } from 'node:fs/promises'
import { Router, type Request, type RequestHandler, type Response } from 'express'
import { rateLimit } from 'express-rate-limit'
import multer from 'multer'
import type { Config } from '../config.ts'
import { ForbiddenError, InvalidFieldError, PayloadTooLargeError } from '../errors.ts'
import { mayAnywhere, type Actor } from './actor.ts'
import { authenticate } from './authenticate.ts'
import type { Endpoint, UploadedFile } from './endpoint.ts'
import { clientOf } from './express-client.ts'
import { FileAnswer } from './file-answer.ts'
import { onceForKey, requireIdempotencyKey } from './idempotency.ts'

const REQUESTS_PER_MINUTE = 3_000

async function actorOf(request: Request, response: Response, endpoint: Endpoint, config: Config): Promise<Actor | undefined> {
  if (endpoint.allow === 'anyone') return undefined
  const actor = await authenticate(config.accessTokenKeys, request.get('authorization'), clientOf(request, response))
  if (endpoint.allow !== 'signed-in' && !mayAnywhere(actor, endpoint.allow)) throw new ForbiddenError(endpoint.allow)
  return actor
}

/** An upload is read only after the caller was found to be allowed to send it. */
function receiveFile(endpoint: Endpoint, uploadDirectory: string): RequestHandler | undefined {
  if (!endpoint.upload) return undefined
  const upload = multer({ dest: uploadDirectory, limits: { fileSize: endpoint.upload.maxBytes, files: 1, fields: 20, fieldSize: 100_000 } })
  return upload.single('file')
}

function run(handler: RequestHandler, request: Request, response: Response): Promise<void> {
  return new Promise((resolve, reject) => {
    void handler(request, response, (error?: unknown) => (error === undefined ? resolve() : reject(uploadRefusal(error))))
  })
}

/** What multer refuses, in words for a person. */
function uploadRefusal(error: unknown): unknown {
  if (!(error instanceof multer.MulterError)) return error
  if (error.code === 'LIMIT_FILE_SIZE') return new PayloadTooLargeError('The file', '100 MB')
  return new InvalidFieldError('/file', 'Send exactly one file, in the field “file”.')
}

function uploadedFile({ file }: Request): UploadedFile | undefined {
  // Browsers send file names as UTF-8 bytes that the multipart parser reads as Latin-1.
  return file && { path: file.path, originalName: Buffer.from(file.originalname, 'latin1').toString('utf8'), sizeBytes: file.size }
}

function sendFile(response: Response, { file }: FileAnswer): void {
  response.attachment(file.name)
  if (file.isInline) response.set('Content-Disposition', response.get('Content-Disposition')?.replace('attachment', 'inline'))
  response.type(file.mediaType)
  if (Buffer.isBuffer(file.content)) response.send(file.content)
  else file.content.on('error', () => response.destroy()).pipe(response)
}

function reply(response: Response, endpoint: Endpoint, answer: unknown): void {
  if (response.headersSent) return
  if (answer instanceof FileAnswer) sendFile(response, answer)
  else if (endpoint.status === 204) response.status(204).end()
  // Outside production a wrong answer is a failing test, never a silent surprise for a client.
  else response.status(endpoint.status).json(process.env['NODE_ENV'] === 'production' ? answer : endpoint.schemas.answer?.parse(answer))
}

function handlerFor(endpoint: Endpoint, config: Config): RequestHandler {
  const receive = receiveFile(endpoint, `${config.dataDirectory}/uploads`)
  return async (request, response) => {
    const actor = await actorOf(request, response, endpoint, config)
    const aborted = new AbortController()
    response.on('close', () => aborted.abort())
    try {
      if (receive) await run(receive, request, response)
      const client = clientOf(request, response)
      // Express leaves a missing body undefined; an endpoint without a body schema never looks at it.
      const body: unknown = request.body
      const call = {
        actor,
        params: request.params,
        query: request.query,
        body,
        file: uploadedFile(request),
        client,
        signal: aborted.signal,
      }
      if (!endpoint.idempotent || !actor) return reply(response, endpoint, await endpoint.run(call))
      const key = requireIdempotencyKey(request.get('idempotency-key'))
      const route = `${endpoint.method} ${request.baseUrl}${request.path}`
      reply(response, endpoint, await onceForKey({ actor, route, key, body }, () => endpoint.run(call)))
    } finally {
      if (request.file) await unlink(request.file.path).catch(ignoreMissingFile)
    }
  }
}

function ignoreMissingFile(error: NodeJS.ErrnoException): void {
  if (error.code !== 'ENOENT') throw error
}

/** One router for all endpoints. */
export function mount(endpoints: readonly Endpoint[], config: Config): Router {
  const router = Router()
  router.use(
    rateLimit({
      windowMs: 60_000,
      limit: REQUESTS_PER_MINUTE,
      standardHeaders: 'draft-8',
      legacyHeaders: false,
      message: {
        type: '/problems/too-many-requests',
        title: 'Too many requests from this address. Wait a moment.',
        status: 429,
      },
    }),
  )
  for (const endpoint of endpoints) router[endpoint.method](endpoint.path, handlerFor(endpoint, config))
  return router
}
