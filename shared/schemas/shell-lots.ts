import { z } from 'zod'
import { Id, UtcTime, Version, WeightMg } from './field.ts'
import { CapsuleSizeName, changeFields, code, words } from './master-fields.ts'

/** Below this a tare says next to nothing of the lot; the trade uses 50 to 100. */
export const FEWEST_SHELLS = 10
export const MOST_SHELLS = 1_000

const lotFields = { code: code(30), capsuleSize: CapsuleSizeName, material: words(60), isActive: z.boolean() }

export const CreateShellLot = z
  .strictObject({ siteId: Id, ...lotFields })
  .meta({ id: 'CreateShellLot', description: 'A lot of empty capsules.' })
export type CreateShellLot = z.output<typeof CreateShellLot>

export const UpdateShellLot = z
  .strictObject({ ...lotFields, ...changeFields })
  .meta({ id: 'UpdateShellLot', description: 'A shell lot as it shall be, the version that was seen, and why.' })
export type UpdateShellLot = z.output<typeof UpdateShellLot>

export const RecordTare = z
  .strictObject({
    weightsMg: z
      .array(WeightMg)
      .min(FEWEST_SHELLS, `Weigh at least ${FEWEST_SHELLS} shells.`)
      .max(MOST_SHELLS, `At most ${MOST_SHELLS} shells at once.`),
  })
  .meta({ id: 'RecordTare', description: 'Empty shells of a lot, each weighed alone; they make the next tare of the lot.' })
export type RecordTare = z.output<typeof RecordTare>

export const RecordTareFile = z.strictObject({ unit: z.enum(['mg', 'g']), decimal: z.enum(['.', ',']).default('.') }).meta({
  id: 'RecordTareFile',
  description: 'A CSV of one column of empty-shell weights: its unit and its decimal sign, said by a person.',
})
export type RecordTareFile = z.output<typeof RecordTareFile>

export const TareGuardAnswer = z
  .object({
    productId: Id,
    productCode: z.string(),
    targetFillMg: z.number(),
    /** Root mean square of the fill SD of the last samples weighed net of their own shell, or estimated; null where there is none. */
    fillSdMg: z.number().nullable(),
    samples: z.int(),
    ratio: z.number().nullable(),
    inflationPercent: z.number().nullable(),
    advice: z.enum(['mean-tare', 'show-both', 'individual-tare', 'unknown']),
    /** Standard error of the tare in percent of the target: the bias that the mean may carry for the whole lot. */
    biasPercent: z.number(),
  })
  .meta({ id: 'TareGuard', description: 'Whether one mean tare will do for a product, given the scatter of shells and fill.' })
export type TareGuardAnswer = z.output<typeof TareGuardAnswer>

export const ShellLotAnswer = z
  .object({
    id: Id,
    siteId: Id,
    code: z.string(),
    capsuleSize: z.string(),
    material: z.string(),
    tareVersion: z.int(),
    tareN: z.int(),
    tareMeanMg: z.number().nullable(),
    tareSdMg: z.number().nullable(),
    tareStandardErrorMg: z.number().nullable(),
    tareWeighedAt: UtcTime.nullable(),
    isActive: z.boolean(),
    hasBatches: z.boolean(),
    version: Version,
  })
  .meta({ id: 'ShellLot', description: 'A lot of empty capsules and its tare in force.' })
export type ShellLotAnswer = z.output<typeof ShellLotAnswer>

export const ShellLotDetail = ShellLotAnswer.extend({
  tares: z.array(
    z.object({
      tareVersion: z.int(),
      n: z.int(),
      meanMg: z.number(),
      sdMg: z.number(),
      standardErrorMg: z.number(),
      weightsMg: z.array(z.number()),
    }),
  ),
  guards: z.array(TareGuardAnswer),
}).meta({
  id: 'ShellLotDetail',
  description: 'A shell lot with every tare it ever had, newest first, and what the tare in force is good for.',
})
export type ShellLotDetail = z.output<typeof ShellLotDetail>

export const ShellLotId = z.object({ shellLotId: Id })
