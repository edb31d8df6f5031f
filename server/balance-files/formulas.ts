const PLAIN_DASHES = /^[-–—]+$/
const RULE = /^[=\-+*_#~]{2,}$/
const SIGNED_NUMBER = /^[+-]\s*\d+(?:[.,]\d+)?(?:\s*[a-zµ%]{1,3})?$/i

/**
 * Whether a spreadsheet would run this cell: it opens with =, @, + or - (also behind blanks) and is not simply a signed
 * number, a dash for "nothing" or a drawn rule. Requirement E33 leaves numbers alone, so -3.2 and +3.2 are none.
 */
export function isFormula(cell: string): boolean {
  // Most cells open with a digit or a letter: no blank to cut off, nothing to match.
  if (cell.charCodeAt(0) > 0x2d && cell.charCodeAt(0) < 0x3d) return false
  const text = cell.trimStart()
  const first = text.charCodeAt(0)
  if (first !== 0x3d && first !== 0x40 && first !== 0x2b && first !== 0x2d) return false
  const whole = text.trimEnd()
  return !(PLAIN_DASHES.test(whole) || RULE.test(whole) || SIGNED_NUMBER.test(whole))
}
