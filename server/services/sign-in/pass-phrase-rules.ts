import { COMMON_PASS_PHRASES } from './common-pass-phrases.ts'

const MIN_CHARACTERS = 15
const MAX_CHARACTERS = 128

/**
 * Why a pass-phrase is refused, or undefined when it may be used (NIST SP 800-63B revision 4, 3.1.1.2): length counted
 * in code points of the NFC text, no composition rules, none that is known to be common, repeated or made from the
 * names around the person.
 */
export function passPhraseProblem(passPhrase: string, names: readonly string[]): string | undefined {
  const text = passPhrase.normalize('NFC')
  const characters = [...text].length
  if (characters < MIN_CHARACTERS) return `A pass-phrase needs at least ${MIN_CHARACTERS} characters; this one has ${characters}.`
  if (characters > MAX_CHARACTERS) return `A pass-phrase may have at most ${MAX_CHARACTERS} characters; this one has ${characters}.`
  const folded = text.toLocaleLowerCase('en').replace(/\s+/g, '')
  if (new Set(folded).size < 5) return 'This pass-phrase repeats too few different characters.'
  if (COMMON_PASS_PHRASES.has(folded)) return 'This pass-phrase is one of the most common ones.'
  const name = names
    .map((word) => word.toLocaleLowerCase('en').replace(/\s+/g, ''))
    .find((word) => word.length >= 4 && isMostly(folded, word))
  return name === undefined ? undefined : 'This pass-phrase is made from the name of a person, site, machine or the product.'
}

/** Whether little is left of the text once the word is taken out of it. */
function isMostly(text: string, word: string): boolean {
  return text.includes(word) && text.replaceAll(word, '').length < 8
}
