import type { Role } from '#shared/permissions.ts'

const PAGES: readonly (readonly [Role, string])[] = [
  ['qa', '/release'],
  ['engineer', '/watch'],
  ['fitter', '/change'],
  ['operator', '/weigh'],
  ['viewer', '/review'],
  ['administrator', '/set-up'],
]

/** Where each role lands: the page of the work it comes for. */
export function landingPage(roles: readonly Role[]): string {
  return PAGES.find(([role]) => roles.includes(role))?.[1] ?? '/review'
}
