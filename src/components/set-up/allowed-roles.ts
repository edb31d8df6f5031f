import { PERMISSIONS, type Permission } from '#shared/permissions.ts'
import { roleName } from '@/format/role.ts'

/** Who may do it, in words: “process engineer or quality assurance”. */
export function allowedRoles(permission: Permission): string {
  const names = PERMISSIONS[permission].map((role) => roleName(role).toLowerCase())
  return names.length < 2 ? (names[0] ?? 'nobody') : `${names.slice(0, -1).join(', ')} or ${names.at(-1) ?? ''}`
}
