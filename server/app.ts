import { randomUUID } from 'node:crypto'
import { existsSync } from 'node:fs'
import { resolve } from 'node:path'
import compression from 'compression'
import cookieParser from 'cookie-parser'
import express, { type ErrorRequestHandler, type Express, type RequestHandler } from 'express'
import helmet from 'helmet'
import type { Logger } from 'pino'
import { pinoHttp } from 'pino-http'
import type { Config } from './config.ts'
import { NotFoundError } from './errors.ts'
import { mount } from './http/mount.ts'
import { toProblem } from './http/problem.ts'
import { allEndpoints } from './routes/index.ts'

const JSON_BODY_LIMIT = '24mb'
const CLIENT_FILES = resolve(import.meta.dirname, '../dist')

function security(config: Config): RequestHandler {
  const isTls = config.http.publicOrigin?.startsWith('https:') === true
  return helmet({
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        defaultSrc: ["'self'"],
        scriptSrc: ["'self'"],
        styleSrc: ["'self'"],
        // Element Plus and the chart library place things by style attributes; no style sheet or script may be inline.
        styleSrcAttr: ["'unsafe-inline'"],
        imgSrc: ["'self'", 'data:', 'blob:'],
        fontSrc: ["'self'", 'data:'],
        connectSrc: ["'self'"],
        objectSrc: ["'none'"],
        baseUri: ["'none'"],
        frameAncestors: ["'none'"],
        formAction: ["'self'"],
        ...(isTls ? { upgradeInsecureRequests: [] } : {}),
      },
    },
    strictTransportSecurity: isTls ? { maxAge: 31_536_000, includeSubDomains: true } : false,
    crossOriginEmbedderPolicy: false,
  })
}

/** A state change from a page of another origin is refused before anything is read (requirement E18). */
const sameOriginOnly: RequestHandler = (request, response, next) => {
  const origin = request.get('origin')
  const isSafe = request.method === 'GET' || request.method === 'HEAD'
  if (isSafe || origin === undefined || new URL(origin).host === request.get('host')) return next()
  response
    .status(403)
    .type('application/problem+json')
    .json({ type: '/problems/foreign-origin', title: 'Requests from other sites are refused.', status: 403 })
}

const noStore: RequestHandler = (_request, response, next) => {
  response.set('Cache-Control', 'no-store')
  next()
}

const noSuchEndpoint: RequestHandler = (request) => {
  throw new NotFoundError('address', request.originalUrl.split('?')[0] ?? '')
}

function answerProblem(logger: Logger): ErrorRequestHandler {
  return (error: unknown, request, response, next) => {
    const problem = toProblem(error)
    if (problem.status >= 500) logger.error({ err: error, requestId: request.id }, problem.title)
    if (response.headersSent) return next(error)
    if (typeof problem['retryAfterSeconds'] === 'number') response.set('Retry-After', String(problem['retryAfterSeconds']))
    response
      .status(problem.status)
      .type('application/problem+json')
      .send(JSON.stringify({ ...problem, requestId: request.id }))
  }
}

function serveClient(app: Express): void {
  if (!existsSync(CLIENT_FILES)) return
  app.use('/assets', express.static(`${CLIENT_FILES}/assets`, { immutable: true, maxAge: '1y', fallthrough: false }))
  app.use(express.static(CLIENT_FILES, { index: false }))
  app.get('/{*path}', (_request, response) => {
    response.set('Cache-Control', 'no-cache').sendFile(`${CLIENT_FILES}/index.html`)
  })
}

/** The middleware in order: who asks, what is allowed in, the API, the client's files, and errors last. */
export function createApp(config: Config, logger: Logger): Express {
  const app = express()
  app.disable('x-powered-by')
  app.set('trust proxy', config.http.trustProxy)
  app.set('query parser', 'simple')
  app.use(pinoHttp({ logger, genReqId: () => randomUUID(), autoLogging: false }))
  app.use(security(config))
  app.use(compression())
  const endpoints = allEndpoints(config)
  app.use(
    '/api',
    noStore,
    sameOriginOnly,
    cookieParser(),
    express.json({ limit: JSON_BODY_LIMIT, strict: true }),
    mount(endpoints, config),
    noSuchEndpoint,
  )
  serveClient(app)
  app.use(answerProblem(logger))
  return app
}
