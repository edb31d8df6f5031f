import { z } from 'zod'
import { SIGNAL_SEVERITIES, SIGNAL_STATES } from '../vocabulary.ts'
import { Id, UtcTime, Version } from './field.ts'

export const SignalAnswer = z
  .object({
    id: Id,
    batchId: Id,
    batchNumber: z.string(),
    sampleId: Id,
    sampleSequence: z.int(),
    severity: z.enum(SIGNAL_SEVERITIES),
    sources: z.array(
      z.object({
        test: z.string(),
        name: z.string(),
        severity: z.enum(SIGNAL_SEVERITIES),
        sentence: z.string(),
        sampleIds: z.array(z.string()),
      }),
    ),
    sentence: z.string(),
    state: z.enum(SIGNAL_STATES),
    raisedAt: UtcTime,
    acknowledgedBy: z.string().nullable(),
    acknowledgedAt: UtcTime.nullable(),
    cause: z.string().nullable(),
    reaction: z.string().nullable(),
    closedBy: z.string().nullable(),
    closedAt: UtcTime.nullable(),
    version: Version,
  })
  .meta({ id: 'Signal', description: 'What a sample showed that needs somebody, and what was done about it.' })
export type SignalAnswer = z.output<typeof SignalAnswer>

export const SignalQuery = z
  .strictObject({
    siteId: Id.optional(),
    batchId: Id.optional(),
    state: z.enum([...SIGNAL_STATES, 'open']).optional(),
    limit: z.coerce.number().int().min(1).max(500).default(200),
  })
  .meta({ id: 'SignalQuery', description: 'Which signals to list; `open` means not closed.' })
export type SignalQuery = z.output<typeof SignalQuery>

export const AcknowledgeSignal = z
  .strictObject({ version: Version })
  .meta({ id: 'AcknowledgeSignal', description: 'Somebody has seen it and acts.' })
export type AcknowledgeSignal = z.output<typeof AcknowledgeSignal>

export const CloseSignal = z
  .strictObject({
    version: Version,
    cause: z.string().trim().min(3, 'Say what caused it.').max(200),
    reaction: z.string().trim().min(3, 'Say what was done.').max(2_000),
  })
  .meta({ id: 'CloseSignal', description: 'What caused it and what was done.' })
export type CloseSignal = z.output<typeof CloseSignal>
