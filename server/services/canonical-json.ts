/**
 * One text for one content, on any machine: keys sorted, no spaces, dates in ISO 8601, absent fields left out
 * (the idea of RFC 8785, for the plain values that records are made of).
 */
export function canonicalJson(value: unknown): string {
  if (value instanceof Date) return JSON.stringify(value.toISOString())
  if (Array.isArray(value)) return `[${value.map((item) => canonicalJson(item ?? null)).join(',')}]`
  if (typeof value === 'object' && value !== null) {
    const fields = Object.entries(value)
      .filter(([, field]) => field !== undefined)
      .sort(([a], [b]) => (a < b ? -1 : 1))
      .map(([key, field]) => `${JSON.stringify(key)}:${canonicalJson(field)}`)
    return `{${fields.join(',')}}`
  }
  return JSON.stringify(value)
}
