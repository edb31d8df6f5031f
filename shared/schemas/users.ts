import { z } from 'zod'
import { ROLES } from '../permissions.ts'
import { Id, Reason, Version } from './field.ts'
import { words } from './master-fields.ts'

/** One person has one address, however it is typed: compatibility forms and capitals are folded (requirement A31). */
export function normaliseEmail(email: string): string {
  return email.normalize('NFKC').trim().toLowerCase()
}

const Roles = z
  .array(z.enum(ROLES))
  .max(ROLES.length)
  .refine((roles) => new Set(roles).size === roles.length, 'Name each role once.')

export const CreateUser = z
  .strictObject({
    siteId: Id,
    email: z.string().max(200).transform(normaliseEmail).pipe(z.email('An e-mail address is expected, such as name@site.example.')),
    name: words(120),
    roles: Roles.min(1, 'Choose at least one role.'),
  })
  .meta({ id: 'CreateUser', description: 'A person with roles at one site; the first pass-phrase is made by the server and shown once.' })
export type CreateUser = z.output<typeof CreateUser>

export const RenameUser = z
  .strictObject({ name: words(120), version: Version, reason: Reason })
  .meta({ id: 'RenameUser', description: 'The printed name of a person; what they signed before keeps the name it was signed with.' })
export type RenameUser = z.output<typeof RenameUser>

export const SetRoles = z
  .strictObject({ siteId: Id, roles: Roles, version: Version, reason: Reason })
  .meta({ id: 'SetRoles', description: 'All roles of a person at one site; an empty list takes the site away. Their sessions end.' })
export type SetRoles = z.output<typeof SetRoles>

export const SetUserActive = z
  .strictObject({ isActive: z.boolean(), version: Version, reason: Reason })
  .meta({ id: 'SetUserActive', description: 'A person may sign in, or not. Nobody is ever deleted. Their sessions end.' })
export type SetUserActive = z.output<typeof SetUserActive>

export const ReplacePassPhrase = z.strictObject({ version: Version, reason: Reason }).meta({
  id: 'ReplacePassPhrase',
  description: 'A lost or exposed pass-phrase is replaced by a first one; all sessions of the person end.',
})
export type ReplacePassPhrase = z.output<typeof ReplacePassPhrase>

export const UserAnswer = z
  .object({
    id: Id,
    email: z.string(),
    name: z.string(),
    isActive: z.boolean(),
    mustChangePassPhrase: z.boolean(),
    /** Roles at the sites that the caller administers. */
    sites: z.array(z.object({ siteId: Id, siteCode: z.string(), roles: z.array(z.enum(ROLES)) })),
    openSessions: z.int(),
    lastSignInAt: z.iso.datetime().nullable(),
    version: Version,
  })
  .meta({ id: 'User', description: 'A person who may sign in, and in which roles.' })
export type UserAnswer = z.output<typeof UserAnswer>

export const FirstPassPhrase = z
  .object({ user: UserAnswer, firstPassPhrase: z.string() })
  .meta({ id: 'FirstPassPhrase', description: 'A person and the pass-phrase for their first sign-in; it is never shown again.' })
export type FirstPassPhrase = z.output<typeof FirstPassPhrase>

export const UserId = z.object({ userId: Id })
