import type { ChangePassPhrase } from '#shared/schemas/auth.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { outsideTransaction } from '../../database/transaction-scope.ts'
import { InvalidFieldError, SignedOutError } from '../../errors.ts'
import type { Actor } from '../../http/actor.ts'
import type { Client } from '../../http/client.ts'
import { Machine } from '../../models/machine.ts'
import { Site } from '../../models/site.ts'
import { User } from '../../models/user.ts'
import { appendAudit, chainOf } from '../audit.ts'
import { hashPassPhrase, verifyPassPhrase } from './pass-phrase-hash.ts'
import { passPhraseProblem } from './pass-phrase-rules.ts'
import { endSessionsOf } from './sessions.ts'
import { countFailure, refuseWhileBlocked, throttleSubjects } from './throttle.ts'

/** The names that a pass-phrase may not be made from: the person, the product, the sites and machines around them. */
async function namesAround(user: User): Promise<string[]> {
  const sites = await Site.findAll()
  const machines = await Machine.findAll()
  return ['scruple', user.name, user.email.split('@')[0] ?? '', ...sites.map(({ name }) => name), ...machines.map(({ name }) => name)]
}

/** Refuses a pass-phrase that the rules do not allow for this person, naming the reason. */
export async function requireAllowedPassPhrase(pointer: string, passPhrase: string, user: User): Promise<void> {
  const problem = passPhraseProblem(passPhrase, await namesAround(user))
  if (problem !== undefined) throw new InvalidFieldError(pointer, problem)
}

/** Checks that the caller is the person they say, counting failures with those of sign-in (requirement A33). */
export async function requireOwnPassPhrase(actor: Actor, passPhrase: string, pointer: string, client: Client): Promise<User> {
  const user = await User.findByPk(actor.userId)
  if (!user) throw new SignedOutError()
  const subjects = throttleSubjects(user.email, client.address)
  await refuseWhileBlocked([subjects.account], new Date())
  const { isRight } = await verifyPassPhrase(passPhrase, user.passPhraseHash)
  if (isRight) return user
  await outsideTransaction(() =>
    inTransaction(async () => {
      await countFailure(subjects, new Date())
      await appendAudit({ actor, chain: chainOf.signIns, action: 'pass-phrase:refused', record: { kind: 'user', id: user.id } })
    }),
  )
  throw new InvalidFieldError(pointer, 'This is not your pass-phrase.')
}

/** Sets a new pass-phrase after checking the old one; all other sessions of the person end. */
export async function changePassPhrase(actor: Actor, { current, next }: ChangePassPhrase, client: Client): Promise<void> {
  const user = await requireOwnPassPhrase(actor, current, '/current', client)
  await requireAllowedPassPhrase('/next', next, user)
  const passPhraseHash = await hashPassPhrase(next)
  await inTransaction(async () => {
    await user.update({ passPhraseHash, mustChangePassPhrase: false, version: user.version + 1 })
    await endSessionsOf(user.id, 'pass-phrase-changed', client, actor.sessionId)
    await appendAudit({ actor, chain: chainOf.people, action: 'user:change-pass-phrase', record: { kind: 'user', id: user.id } })
  })
}
