import { randomInt } from 'node:crypto'
import { mkdir, writeFile } from 'node:fs/promises'
import { dirname } from 'node:path'
import type { ScenarioPerson } from '#fixtures/scenario/records.ts'
import type { Role } from '#shared/permissions.ts'
import { newId } from '../../models/new-id.ts'
import { Session } from '../../models/session.ts'
import { User } from '../../models/user.ts'
import { UserRole } from '../../models/user-role.ts'
import { chainOf } from '../audit.ts'
import { hashPassPhrase } from '../sign-in/pass-phrase-hash.ts'
import type { AuditBook, DemoPerson } from './audit-book.ts'
import { insertAll } from './insert-all.ts'

/** No bcrypt text: people without a demo sign-in cannot sign in at all. */
const NO_SIGN_IN = 'none'
/** Consonants and vowels in turn: easy to type, 5 × 6 letters of chance, about 99 bits. */
const CONSONANTS = 'bdfghjklmnprstvz'
const VOWELS = 'aeiou'

export interface DemoSignIn {
  role: Role
  email: string
  password: string
}

/** A pass-phrase by chance, new at each installation. */
export function makePassPhrase(): string {
  const letter = (letters: string): string => letters[randomInt(letters.length)] ?? ''
  const word = (): string => Array.from({ length: 3 }, () => letter(CONSONANTS) + letter(VOWELS)).join('')
  return Array.from({ length: 5 }, word).join('-')
}

export interface DemoPeople {
  /** By printed name. */
  find(name: string): DemoPerson & { sessionId: string }
  signIns: DemoSignIn[]
}

/** Stores the people of the scenario; the first of each role gets a pass-phrase. */
export async function storePeople(
  people: readonly ScenarioPerson[],
  { siteId, at, book }: { siteId: string; at: Date; book: AuditBook },
): Promise<DemoPeople> {
  const seen = new Set<Role>()
  const signIns: DemoSignIn[] = []
  const stored = people.map((person) => {
    const [role] = person.roles
    if (role === undefined || seen.has(role)) return { ...person, id: newId(), sessionId: newId(), password: undefined }
    seen.add(role)
    const password = makePassPhrase()
    signIns.push({ role, email: person.email, password })
    return { ...person, id: newId(), sessionId: newId(), password }
  })
  const hashes = await Promise.all(
    stored.map(({ password }) => (password === undefined ? Promise.resolve(NO_SIGN_IN) : hashPassPhrase(password))),
  )
  await insertAll(
    User,
    stored.map(({ id, email, name }, place) => ({
      id,
      email,
      name,
      passPhraseHash: hashes[place] ?? NO_SIGN_IN,
      signatureAcceptedAt: at,
      createdAt: at,
      updatedAt: at,
    })),
  )
  await insertAll(
    UserRole,
    stored.flatMap(({ id, roles }) => roles.map((role) => ({ userId: id, siteId, role }))),
  )
  await insertAll(
    Session,
    stored.map((person) => endedSession(person, at)),
  )
  for (const { id, email, name, roles } of stored) {
    book.note(at, null, { chain: chainOf.people, action: 'user:create', record: { kind: 'user', id }, new: { email, name, siteId, roles } })
  }
  const byName = new Map(stored.map((person) => [person.name, person]))
  return {
    signIns,
    find: (name) => {
      const person = byName.get(name)
      if (!person) throw new Error(`The scenario has nobody called ${name}.`)
      return person
    },
  }
}

/** Signatures of the demo belong to a session that ended before anybody could use it. */
function endedSession({ id: userId, sessionId: id }: { id: string; sessionId: string }, at: Date) {
  const times = { rotatedAt: at, startedAt: at, lastUsedAt: at, expiresAt: at, endedAt: at }
  return { id, userId, refreshHash: '0'.repeat(64), endReason: 'demo', address: '127.0.0.1', device: 'demo scenario', ...times }
}

/** Keeps the sign-ins where only the owner of the files can read them. */
export async function writeSignIns(file: string, signIns: readonly DemoSignIn[]): Promise<void> {
  await mkdir(dirname(file), { recursive: true })
  await writeFile(file, `${JSON.stringify(signIns, null, 2)}\n`, { mode: 0o600 })
}
