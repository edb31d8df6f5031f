import { z } from 'zod'
import { Id, Version } from './field.ts'
import { changeFields, code, words } from './master-fields.ts'

function isTimeZone(name: string): boolean {
  try {
    new Intl.DateTimeFormat('en', { timeZone: name })
    return true
  } catch (error) {
    if (error instanceof RangeError) return false
    throw error
  }
}

const siteFields = {
  code: code(12),
  name: words(120),
  timeZone: z
    .string()
    .trim()
    .max(60)
    .refine((name) => /^[A-Za-z]/.test(name) && isTimeZone(name), 'Expected the name of a time zone, such as Europe/Dublin or UTC.'),
}

export const CreateSite = z.strictObject(siteFields).meta({ id: 'CreateSite', description: 'A site: its code, name and time zone.' })
export type CreateSite = z.output<typeof CreateSite>

export const UpdateSite = z
  .strictObject({ ...siteFields, ...changeFields })
  .meta({ id: 'UpdateSite', description: 'A site as it shall be, the version that was seen, and why.' })
export type UpdateSite = z.output<typeof UpdateSite>

export const SiteAnswer = z
  .object({ id: Id, code: z.string(), name: z.string(), timeZone: z.string(), version: Version })
  .meta({ id: 'Site', description: 'A place with its own machines, people and time zone.' })
export type SiteAnswer = z.output<typeof SiteAnswer>

export const SiteId = z.object({ siteId: Id })
