import type { CreateUser, FirstPassPhrase, ReplacePassPhrase } from '#shared/schemas/users.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { ConflictError } from '../../errors.ts'
import { requirePermission, type Actor } from '../../http/actor.ts'
import type { Client } from '../../http/client.ts'
import { User } from '../../models/user.ts'
import { UserRole } from '../../models/user-role.ts'
import { appendAudit, chainOf } from '../audit.ts'
import { requireVersion } from '../require-version.ts'
import { hashPassPhrase } from '../sign-in/pass-phrase-hash.ts'
import { endSessionsOf } from '../sign-in/sessions.ts'
import { makeFirstPassPhrase } from './first-pass-phrase.ts'
import { findUser, presentOneUser } from './list-users.ts'
import { requireWholePerson } from './change-user.ts'

/** A new person with a first pass-phrase that is in this answer and nowhere else. */
export async function createUser(actor: Actor, { siteId, email, name, roles }: CreateUser): Promise<FirstPassPhrase> {
  requirePermission(actor, 'user:write', { siteId, kind: 'site', id: siteId })
  const firstPassPhrase = makeFirstPassPhrase()
  const passPhraseHash = await hashPassPhrase(firstPassPhrase)
  return inTransaction(async () => {
    if (await User.findOne({ where: { email } })) {
      const message = 'Somebody has this e-mail address already; an address is never given to a second person.'
      throw new ConflictError('already-there', message, { issues: [{ pointer: '/email', message }] })
    }
    const user = await User.create({ email, name, passPhraseHash, mustChangePassPhrase: true })
    for (const role of roles) await UserRole.create({ userId: user.id, siteId, role })
    const record = { kind: 'user', id: user.id }
    await appendAudit({ actor, chain: chainOf.people, action: 'user:create', record, new: { email, name, siteId, roles } })
    return { user: await presentOneUser(actor, user), firstPassPhrase }
  })
}

/** A lost or exposed pass-phrase dies at once, with every session; a first one takes its place (requirement A34). */
export async function replacePassPhrase(
  actor: Actor,
  id: string,
  { version, reason }: ReplacePassPhrase,
  client: Client,
): Promise<FirstPassPhrase> {
  const firstPassPhrase = makeFirstPassPhrase()
  const passPhraseHash = await hashPassPhrase(firstPassPhrase)
  return inTransaction(async () => {
    const { user, roles } = await findUser(actor, id)
    const old = await presentOneUser(actor, user)
    requireVersion('user', { version: user.version, toJSON: () => old }, version)
    if (id === actor.userId) throw new ConflictError('own-account', 'Change your own pass-phrase on the page of your account.')
    requireWholePerson(actor, roles)
    await user.update({ passPhraseHash, mustChangePassPhrase: true, version: version + 1 })
    await endSessionsOf(id, 'pass-phrase-replaced', client)
    await appendAudit({ actor, chain: chainOf.people, action: 'user:replace-pass-phrase', record: { kind: 'user', id }, reason })
    return { user: await presentOneUser(actor, user), firstPassPhrase }
  })
}
