import { z } from 'zod'
import { UtcTime } from './field.ts'

export const CaughtMail = z
  .object({
    id: z.string(),
    receivedAt: UtcTime,
    from: z.string(),
    to: z.array(z.string()),
    subject: z.string(),
    text: z.string(),
    messageId: z.string(),
  })
  .meta({ id: 'CaughtMail', description: 'A mail that would have gone out, caught on this machine.' })
export type CaughtMail = z.output<typeof CaughtMail>
