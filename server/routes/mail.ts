import { z } from 'zod'
import { CaughtMail } from '#shared/schemas/mail.ts'
import type { Config } from '../config.ts'
import { endpoint, type Endpoint } from '../http/endpoint.ts'
import { listCaughtMail } from '../reads/caught-mail.ts'

/** What the local mail catcher holds; in production mail goes out and this list is empty. */
export function mailEndpoints({ dataDirectory }: Config): Endpoint[] {
  return [
    endpoint({
      method: 'get',
      path: '/caught-mail',
      summary: 'Mail caught on this machine',
      allow: 'mail:read',
      answer: { status: 200, schema: z.array(CaughtMail) },
      handle: () => listCaughtMail(dataDirectory),
    }),
  ]
}
