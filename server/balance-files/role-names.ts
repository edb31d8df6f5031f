import type { BalanceFileRole } from '#shared/schemas/balance-files.ts'

/** What sites call their columns, in the languages that balances commonly print. */
export const ROLE_NAMES: Readonly<Record<BalanceFileRole, RegExp>> = {
  weight: /weight|weigh|mass|gross|\bnet\b|fill|reading|gewicht|masse|brutto|netto|poids|peso|\bmg\b|\[g\]/i,
  unit: /^units?$|einheit|unit[ée]|unidad/i,
  position: /pos|bore|place|platz/i,
  segment: /segment|\bseg\b/i,
  sample: /sample|probe|[ée]chantillon|muestra|series|\bset\b/i,
  time: /time|zeit|heure|hora|clock|stamp/i,
  date: /date|datum|fecha|\bday\b/i,
  status: /stat|stab|flag/i,
}
/** Whether a column of this name holds weights. */
export function namesWeight(name: string): boolean {
  return ROLE_NAMES.weight.test(name)
}
