import { createHash } from 'node:crypto'
import { TooManyAttemptsError } from '../../errors.ts'
import { SignInThrottle } from '../../models/sign-in-throttle.ts'

/** The first failures cost nothing, so that a slip of the finger does not; then the wait doubles up to an hour (requirement E6). */
const FREE_FAILURES = 4
const FIRST_WAIT_SECONDS = 30
const LONGEST_WAIT_SECONDS = 3_600
/** A quiet day forgets: nobody is locked out for good by a stranger. */
const FORGET_AFTER_MS = 24 * 3_600_000

/** What is counted: one account as seen from one address, so that a stranger elsewhere cannot keep its owner out, and one address over all accounts. */
export function throttleSubjects(email: string, address: string): { account: string; address: string } {
  const subject = (text: string): string => createHash('sha256').update(text).digest('hex')
  return { account: subject(`account ${email} ${address}`), address: subject(`address ${address}`) }
}

/** How long to wait after so many failures in a row. */
export function waitSeconds(failures: number): number {
  if (failures <= FREE_FAILURES) return 0
  return Math.min(FIRST_WAIT_SECONDS * 2 ** (failures - FREE_FAILURES - 1), LONGEST_WAIT_SECONDS)
}

/** Refuses while any of the subjects still has to wait. */
export async function refuseWhileBlocked(subjects: readonly string[], now: Date): Promise<void> {
  const rows = await SignInThrottle.findAll({ where: { subject: [...subjects] } })
  const until = Math.max(0, ...rows.map(({ blockedUntil }) => blockedUntil?.getTime() ?? 0))
  if (until > now.getTime()) throw new TooManyAttemptsError(Math.ceil((until - now.getTime()) / 1_000))
}

/** Counts one more failure; an address may fail five times as often as an account, since many people share it. */
export async function countFailure({ account, address }: { account: string; address: string }, now: Date): Promise<void> {
  await countOne(account, 1, now)
  await countOne(address, 5, now)
}

async function countOne(subject: string, patience: number, now: Date): Promise<void> {
  const known = await SignInThrottle.findByPk(subject)
  const isFresh = known !== null && now.getTime() - known.lastFailureAt.getTime() < FORGET_AFTER_MS
  const failures = (isFresh ? known.failures : 0) + 1
  const wait = waitSeconds(Math.floor(failures / patience))
  const blockedUntil = wait > 0 ? new Date(now.getTime() + wait * 1_000) : null
  await SignInThrottle.upsert({ subject, failures, lastFailureAt: now, blockedUntil })
}

/** A success clears the account's count. */
export async function forgetFailures(account: string): Promise<void> {
  await SignInThrottle.destroy({ where: { subject: account } })
}
