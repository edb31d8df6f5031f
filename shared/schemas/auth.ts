import { z } from 'zod'
import { ROLES } from '../permissions.ts'

export const SignIn = z
  .strictObject({ email: z.string().min(3).max(200), password: z.string().min(1).max(1_000) })
  .meta({ id: 'SignIn', description: 'An e-mail address and the pass-phrase that belongs to it.' })
export type SignIn = z.output<typeof SignIn>

export const SignedInUser = z
  .object({
    id: z.uuid(),
    email: z.string(),
    name: z.string(),
    sites: z.array(z.object({ id: z.uuid(), code: z.string(), name: z.string(), timeZone: z.string(), roles: z.array(z.enum(ROLES)) })),
  })
  .meta({ id: 'SignedInUser', description: 'Who is signed in, and in which roles at which sites.' })
export type SignedInUser = z.output<typeof SignedInUser>

export const SignedIn = z
  .object({ accessToken: z.string(), user: SignedInUser })
  .meta({ id: 'SignedIn', description: 'An access token for ten minutes and the person it stands for.' })
export type SignedIn = z.output<typeof SignedIn>

export const SessionSummary = z
  .object({
    id: z.uuid(),
    startedAt: z.iso.datetime(),
    lastUsedAt: z.iso.datetime(),
    address: z.string(),
    device: z.string(),
    isCurrent: z.boolean(),
  })
  .meta({ id: 'SessionSummary', description: 'One place where a person is signed in.' })
export type SessionSummary = z.output<typeof SessionSummary>

export const ChangePassPhrase = z
  .strictObject({ current: z.string().min(1).max(1_000), next: z.string().min(1).max(1_000) })
  .meta({ id: 'ChangePassPhrase', description: 'The present pass-phrase and the one to come.' })
export type ChangePassPhrase = z.output<typeof ChangePassPhrase>

export const About = z
  .object({
    name: z.string(),
    version: z.string(),
    isDemo: z.boolean(),
    demoSignIns: z.array(z.object({ role: z.enum(ROLES), email: z.string(), password: z.string() })).optional(),
  })
  .meta({ id: 'About', description: 'The program, and in the demo its sign-ins.' })
export type About = z.output<typeof About>
