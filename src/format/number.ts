const THIN_SPACE = ' '

/** A figure with fixed decimals, a true minus sign and thin spaces between thousands; never "-0". */
export function formatFigure(value: number, decimals: number): string {
  const text = Math.abs(value).toFixed(decimals)
  const [whole = '', fraction] = text.split('.')
  const grouped = whole.length > 4 ? whole.replace(/\B(?=(\d{3})+$)/g, THIN_SPACE) : whole
  const sign = value < 0 && Number(text) !== 0 ? '−' : ''
  return `${sign}${grouped}${fraction === undefined ? '' : `.${fraction}`}`
}

/** A difference, with its sign always said. */
export function formatDifference(value: number, decimals: number): string {
  const text = formatFigure(value, decimals)
  return Number(value.toFixed(decimals)) > 0 ? `+${text}` : text
}

/** A weight in mg as the trade reads it; the unit stands beside it or in the header. */
export function formatMg(value: number | null | undefined, decimals = 1): string {
  return value === null || value === undefined ? '–' : formatFigure(value, decimals)
}

export function formatPercent(value: number | null | undefined, decimals = 1): string {
  return value === null || value === undefined ? '–' : `${formatFigure(value, decimals)} %`
}

/** A count of capsules or samples. */
export function formatCount(value: number | null | undefined): string {
  return value === null || value === undefined ? '–' : formatFigure(value, 0)
}

/** A p-value as one reads it: never "0.000". */
export function formatProbability(value: number): string {
  return value < 0.001 ? 'below 0.001' : formatFigure(value, 3)
}
