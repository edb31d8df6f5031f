import { z } from 'zod'

const MG = { 'x-unit': 'mg' }
const PER_UNIT = { 'x-unit': 'mg per unit of the setting' }
const SETTING = { 'x-unit': 'unit of the setting' }
const MOST_SETTINGS = 20

const SettingName = z
  .string()
  .min(1)
  .max(60)
  // A name such as "constructor" would be found on every object.
  .refine((name) => !(name in {}), { error: 'This cannot be the name of a setting.' })

const perSetting = <T extends z.ZodType>(value: T) =>
  z
    .record(SettingName, value)
    .refine((record) => Object.keys(record).length <= MOST_SETTINGS, { error: `At most ${MOST_SETTINGS} settings.` })

export const TuningTrial = z
  .strictObject({
    settings: perSetting(z.number().meta(SETTING)).meta({
      description: 'Readings by name, such as penetration-4; one left out stays as it was.',
    }),
    meanMg: z.number().positive().meta(MG),
    sdMg: z.number().min(0).meta(MG),
    n: z.int().min(2).max(100_000),
  })
  .meta({ id: 'TuningTrial', description: 'The settings of a trial and the sample that was weighed.' })

const SlopePrior = z
  .strictObject({ mgPerUnit: z.number().meta(PER_UNIT), sd: z.number().positive().meta(PER_UNIT) })
  .meta({ id: 'SlopePrior', description: 'What is believed of a slope before any trial.' })

const LeverOptions = z
  .strictObject({
    direction: z.literal([1, -1]).optional().meta({ description: '−1 where a larger reading is lighter.' }),
    min: z.number().optional().meta(SETTING),
    max: z.number().optional().meta(SETTING),
    maxMove: z
      .number()
      .positive()
      .optional()
      .meta({ description: 'The largest single move.', ...SETTING }),
  })
  .refine(({ min, max }) => min === undefined || max === undefined || min < max, { error: 'min must lie below max.', path: ['min'] })
  .meta({ id: 'LeverOptions', description: 'What the site knows of one setting on one machine.' })

export const TuningRequest = z
  .strictObject({
    history: z.array(TuningTrial).min(1).max(200).meta({ description: 'Trials in their order; the last is where the machine stands.' }),
    target: z.number().positive().meta(MG),
    lever: SettingName.optional().meta({ description: 'The setting to move; chosen by the tuning order by default.' }),
    priors: perSetting(SlopePrior).optional(),
    geometry: z
      .strictObject({
        boreDiameterMm: z.number().positive().max(100).meta({ 'x-unit': 'mm' }),
        bulkDensityGPerMl: z.number().positive().max(10).meta({ 'x-unit': 'g/mL' }),
      })
      .optional(),
    levers: perSetting(LeverOptions).optional(),
    rsdLimitPercent: z.number().positive().max(100).optional().meta({ 'x-unit': '%' }),
  })
  .meta({ id: 'TuningRequest', description: 'Logged trials and the target fill weight.' })
export type TuningRequest = z.output<typeof TuningRequest>

const Interval = z.tuple([z.number(), z.number()])

export const TuningAnswer = z
  .object({
    slopes: z
      .record(
        z.string(),
        z.object({
          mgPerUnit: z.number().meta(PER_UNIT),
          sd: z.number().meta(PER_UNIT),
          interval: Interval.meta({ description: '95 % credible.', ...PER_UNIT }),
        }),
      )
      .meta({ description: 'Weight response of each setting.' }),
    recommendation: z
      .object({
        lever: z.string(),
        from: z.number().meta(SETTING),
        to: z.number().meta({ description: 'Equal to `from` where the advice is to leave it.', ...SETTING }),
        predictedMeanMg: z.number().meta(MG),
        interval: Interval.meta({ description: '95 % prediction interval of the next sample mean.', ...MG }),
      })
      .meta({ description: 'One move of one lever. The manual of the machine and the procedures of the site come first.' }),
    cautions: z.array(z.string()),
  })
  .meta({ id: 'TuningAnswer', description: 'Learned slopes, one move, and what to know before it.' })
export type TuningAnswer = z.output<typeof TuningAnswer>
