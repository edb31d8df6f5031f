/** A typed figure with a decimal comma or point; undefined when it is not exactly one number. */
export function parseNumber(text: string): number | undefined {
  const plain = text.trim().replace('−', '-').replace(',', '.')
  return /^[+-]?\d+(\.\d+)?$/.test(plain) ? Number(plain) : undefined
}

/** Decimals that were typed: "96.10" shows two. */
export function shownDecimals(text: string): number {
  return /[.,](\d+)/.exec(text.trim())?.[1]?.length ?? 0
}
