import { QueryTypes } from 'sequelize'
import { ROLES, type Role } from '#shared/permissions.ts'
import { database } from '../database/database.ts'
import { SignedOutError } from '../errors.ts'
import { readAccessToken } from './access-token.ts'
import type { Actor } from './actor.ts'
import type { Client } from './client.ts'

interface Row {
  name: string
  email: string
  siteId: string | null
  role: string | null
}

/** A session, its person and the roles in one read, so that a sign-out or a changed role takes effect at the next request. */
const SESSION_QUERY = `
  SELECT u.name, u.email, r.site_id AS siteId, r.role
  FROM sessions s
  JOIN users u ON u.id = s.user_id AND u.is_active
  LEFT JOIN user_roles r ON r.user_id = u.id
  WHERE s.id = :sessionId AND s.user_id = :userId AND s.ended_at IS NULL AND s.expires_at > UTC_TIMESTAMP(3)`

const isRole = (word: string): word is Role => ROLES.some((role) => role === word)

/** The person behind the bearer token. */
export async function authenticate(keys: readonly string[], authorization: string | undefined, client: Client): Promise<Actor> {
  const token = /^Bearer ([\w.-]+)$/.exec(authorization ?? '')?.[1]
  const named = token === undefined ? undefined : readAccessToken(keys, token)
  if (!named) throw new SignedOutError()
  const rows = await database().query<Row>(SESSION_QUERY, { replacements: named, type: QueryTypes.SELECT })
  const [first] = rows
  if (!first) throw new SignedOutError()
  const rolesBySite = new Map<string, Role[]>()
  for (const { siteId, role } of rows) {
    if (siteId !== null && role !== null && isRole(role)) rolesBySite.set(siteId, [...(rolesBySite.get(siteId) ?? []), role])
  }
  return {
    ...named,
    name: first.name,
    email: first.email,
    rolesBySite,
    terminal: `${client.address} ${client.device}`.slice(0, 200),
    requestId: client.requestId,
  }
}
