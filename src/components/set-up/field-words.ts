const WORDS: Readonly<Record<string, string>> = {
  siteId: 'Site',
  targetFillMg: 'Target fill, mg',
  lowerSpecificationMg: 'Lower specification, mg',
  upperSpecificationMg: 'Upper specification, mg',
  scaleMinMm: 'Scale from, mm',
  scaleMaxMm: 'Scale to, mm',
  discThicknessMm: 'Disc thickness, mm',
  indexesPerMinute: 'Usual speed, indexes/min',
  readabilityMg: 'Readability, mg',
  repeatabilitySdMg: 'Repeatability (SD), mg',
  capacityMg: 'Capacity, mg',
  calibrationDueOn: 'Calibration due on',
  isActive: 'In use',
  deeperIsHigher: 'Deeper reads higher',
}

/** A field's name as a person reads it; other names are taken apart into their words. */
export function fieldWord(field: string): string {
  const words = WORDS[field] ?? field.replace(/([A-Z])/g, (letter) => ` ${letter.toLowerCase()}`)
  return words.charAt(0).toUpperCase() + words.slice(1)
}

/** Any stored value in one line. */
export function shownValue(value: unknown): string {
  if (value === null || value === undefined || value === '') return '–'
  if (typeof value === 'boolean') return value ? 'yes' : 'no'
  if (Array.isArray(value)) return value.map(shownValue).join('; ')
  if (typeof value === 'object')
    return Object.entries(value)
      .map(([field, part]) => `${fieldWord(field)} ${shownValue(part)}`)
      .join(', ')
  return typeof value === 'string' || typeof value === 'number' ? String(value) : ''
}
