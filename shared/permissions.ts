/** The roles of design and trade: what a person is trusted to do at one site. */
export const ROLES = ['operator', 'fitter', 'engineer', 'qa', 'viewer', 'administrator'] as const
export type Role = (typeof ROLES)[number]

/**
 * The single permission table: the server checks it, the client shows by it.
 * Administrators set up the system but never touch production data; whoever weighs does not release.
 */
export const PERMISSIONS = {
  'record:read': ['operator', 'fitter', 'engineer', 'qa', 'viewer', 'administrator'],
  'calculation:run': ['operator', 'fitter', 'engineer', 'qa', 'viewer', 'administrator'],
  'site:write': ['administrator'],
  'user:write': ['administrator'],
  'machine:write': ['administrator', 'engineer'],
  'tooling:write': ['administrator', 'engineer', 'fitter'],
  'product:write': ['administrator', 'engineer'],
  'control-plan:propose': ['engineer'],
  'control-plan:approve': ['qa'],
  'shell-lot:write': ['operator', 'engineer', 'qa'],
  'balance:write': ['administrator', 'engineer'],
  'balance:check': ['operator', 'engineer', 'qa'],
  'batch:plan': ['operator', 'engineer'],
  'batch:run': ['operator', 'engineer'],
  'start-up:approve': ['engineer', 'qa'],
  'changeover:record': ['fitter', 'engineer'],
  'changeover:check': ['operator', 'fitter', 'engineer', 'qa'],
  'event:record': ['operator', 'fitter', 'engineer'],
  'sample:record': ['operator', 'fitter', 'engineer'],
  'sample:correct': ['operator', 'engineer'],
  'sample:exclude': ['engineer'],
  'weighing-file:import': ['operator', 'engineer'],
  'signal:acknowledge': ['operator', 'engineer'],
  'signal:close': ['engineer', 'qa'],
  'deviation:open': ['operator', 'fitter', 'engineer', 'qa'],
  'deviation:close': ['qa'],
  'batch:dispose': ['qa'],
  'review:freeze': ['engineer', 'qa'],
  'review:act': ['engineer', 'qa', 'viewer'],
  'mail:read': ['administrator', 'engineer'],
  'audit:read': ['qa', 'administrator'],
} as const satisfies Record<string, readonly Role[]>

export type Permission = keyof typeof PERMISSIONS

/** Whether any of the roles carries the permission. */
export function mayDo(roles: readonly Role[], permission: Permission): boolean {
  const allowed: readonly Role[] = PERMISSIONS[permission]
  return roles.some((role) => allowed.includes(role))
}
