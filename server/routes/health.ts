import { QueryTypes } from 'sequelize'
import { z } from 'zod'
import { database } from '../database/database.ts'
import { openEndpoint } from '../http/endpoint.ts'

const Health = z.object({ status: z.literal('ok') }).meta({ id: 'Health', description: 'The part that was asked about is well.' })

/** Live: the process turns. Ready: it can also reach its database, so that a balancer may send requests. */
export const healthEndpoints = [
  openEndpoint({
    method: 'get',
    path: '/health/live',
    summary: 'Whether the process turns',
    answer: { status: 200, schema: Health },
    handle: () => ({ status: 'ok' as const }),
  }),
  openEndpoint({
    method: 'get',
    path: '/health/ready',
    summary: 'Whether requests can be served',
    answer: { status: 200, schema: Health },
    problems: [503],
    handle: async () => {
      await database().query('SELECT 1', { type: QueryTypes.SELECT })
      return { status: 'ok' as const }
    },
  }),
]
