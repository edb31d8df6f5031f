const plural = (count: number, one: string, many: string): string => `${String(count)} ${count === 1 ? one : many}`

/** “3 machines, all in use.” or how many are not. */
export function inUseSentence(rows: readonly { isActive: boolean }[], one: string, many: string): string {
  const out = rows.filter(({ isActive }) => !isActive).length
  const all = plural(rows.length, one, many)
  if (out === 0) return rows.length === 1 ? `${all}, in use.` : `${all}, all in use.`
  return `${all}, ${String(out)} of them out of use.`
}

export const USE_WORDS = { true: 'in use', false: 'out of use' } as const

export const useWord = (isActive: boolean): string => USE_WORDS[isActive ? 'true' : 'false']
