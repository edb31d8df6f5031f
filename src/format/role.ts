import type { Role } from '#shared/permissions.ts'

const NAMES: Record<Role, string> = {
  operator: 'Operator',
  fitter: 'Fitter',
  engineer: 'Process engineer',
  qa: 'Quality assurance',
  viewer: 'Viewer',
  administrator: 'Administrator',
}

export function roleName(role: Role): string {
  return NAMES[role]
}

export function roleNames(roles: readonly Role[]): string {
  return roles.map(roleName).join(', ')
}
