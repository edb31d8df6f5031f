import { z } from 'zod'
import { CAPSULE_SIZES } from '../trade/capsule-sizes.ts'
import { Id, Reason, Version } from './field.ts'

/** The fields that the masters share: how records are called, how figures are bounded, how a change is asked for. */
export const code = (longest: number) =>
  z
    .string()
    .trim()
    .min(1, 'Give a code.')
    .max(longest, `A code has at most ${longest} characters.`)
    .regex(/^[\w./-]+$/, 'A code may hold letters, digits, dot, stroke, hyphen and underscore.')

export const words = (longest: number) => z.string().trim().min(1, 'Give it in words.').max(longest, `At most ${longest} characters.`)

export const remarks = (longest: number) => z.string().trim().max(longest, `At most ${longest} characters.`).default('')

/** A figure that the database keeps to the last decimal; more decimals would be lost in silence. */
export const figure = ({ min, max, decimals, unit }: { min: number; max: number; decimals: number; unit: string }) =>
  z
    .number('A number is expected.')
    .min(min, `At least ${min} ${unit}.`)
    .max(max, `At most ${max} ${unit}.`)
    .refine((value) => Number(value.toFixed(decimals)) === value, `At most ${decimals} decimals.`)
    .meta({ 'x-unit': unit })

export const whole = (min: number, max: number) =>
  z.int('A whole number is expected.').min(min, `At least ${min}.`).max(max, `At most ${max}.`)

export const CapsuleSizeName = z
  .string()
  .refine((size) => CAPSULE_SIZES.some((each) => each.size === size), {
    error: `One of the capsule sizes is expected: ${CAPSULE_SIZES.map(({ size }) => size).join(', ')}.`,
  })
  .meta({ id: 'CapsuleSize', description: 'A capsule size as the trade writes it.' })

/** What every change of a master carries: the version that was seen and why it is changed. */
export const changeFields = { version: Version, reason: Reason }

export const SiteQuery = z
  .strictObject({ siteId: Id.optional() })
  .meta({ id: 'SiteQuery', description: 'One of your sites; all of them when left out.' })
export type SiteQuery = z.output<typeof SiteQuery>
