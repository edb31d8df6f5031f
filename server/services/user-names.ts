import { User } from '../models/user.ts'

/** The printed names of people, asked for once for a whole answer. */
export async function userNames(ids: readonly (string | null)[]): Promise<Map<string, string>> {
  const wanted = [...new Set(ids.filter((id) => id !== null))]
  const users = wanted.length === 0 ? [] : await User.findAll({ where: { id: wanted }, attributes: ['id', 'name'] })
  return new Map(users.map(({ id, name }) => [id, name]))
}
