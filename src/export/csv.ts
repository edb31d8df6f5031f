export type CsvCell = string | number | null | undefined

/** Text that a spreadsheet would run as a formula; numbers are left alone, so that they come back equal. */
const FORMULA = /^\s*[=+\-@\t\r]/
const NUMBER = /^[+-]?\d+(\.\d+)?(e[+-]?\d+)?$/i

function cellText(cell: CsvCell): string {
  if (cell === null || cell === undefined) return ''
  if (typeof cell === 'number') return String(cell)
  const safe = FORMULA.test(cell) && !NUMBER.test(cell) ? `'${cell}` : cell
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe
}

/** A table as CSV (RFC 4180). */
export function toCsv(header: readonly string[], rows: readonly (readonly CsvCell[])[]): string {
  return [header, ...rows].map((row) => row.map(cellText).join(',')).join('\r\n') + '\r\n'
}

/** Offers a file to the person. */
export function saveFile(name: string, content: Blob): void {
  const link = document.createElement('a')
  link.href = URL.createObjectURL(content)
  link.download = name
  link.click()
  setTimeout(() => URL.revokeObjectURL(link.href), 10_000)
}

export function saveCsv(name: string, header: readonly string[], rows: readonly (readonly CsvCell[])[]): void {
  saveFile(name, new Blob([toCsv(header, rows)], { type: 'text/csv;charset=utf-8' }))
}
