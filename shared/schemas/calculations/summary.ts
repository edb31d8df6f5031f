import { z } from 'zod'

const UNIT = { 'x-unit': 'as the values' }

export const SummaryRequest = z
  .strictObject({
    values: z
      .array(z.number())
      .min(2)
      .max(1_000_000)
      .meta({ description: 'In any order, one unit.', ...UNIT }),
  })
  .meta({ id: 'SummaryRequest', description: 'Values to summarise.' })
export type SummaryRequest = z.output<typeof SummaryRequest>

export const SummaryAnswer = z
  .object({
    n: z.int(),
    mean: z.number().meta(UNIT),
    sd: z.number().meta({ description: 'Standard deviation, divisor n − 1.', ...UNIT }),
    variance: z.number().meta({ 'x-unit': 'square of the unit of the values' }),
    range: z.number().meta(UNIT),
    min: z.number().meta(UNIT),
    max: z.number().meta(UNIT),
    median: z.number().meta(UNIT),
    rsdPercent: z.number().nullable().meta({ description: '100 · SD / |mean|; null where the mean is zero.', 'x-unit': '%' }),
  })
  .meta({ id: 'SummaryAnswer', description: 'What can be said of the values without an assumption.' })
export type SummaryAnswer = z.output<typeof SummaryAnswer>
