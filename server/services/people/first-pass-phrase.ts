import { randomInt } from 'node:crypto'

/** Consonants and vowels in turn: easy to read out and to type. */
const CONSONANTS = 'bdfghjklmnprstvz'
const VOWELS = 'aeiou'
const WORDS = 5
const SYLLABLES = 3

/** A pass-phrase by chance for a first sign-in: 15 syllables of 80 each, about 94 bits; it must be changed at first use. */
export function makeFirstPassPhrase(): string {
  const letter = (letters: string): string => letters.charAt(randomInt(letters.length))
  const word = (): string => Array.from({ length: SYLLABLES }, () => letter(CONSONANTS) + letter(VOWELS)).join('')
  return Array.from({ length: WORDS }, word).join('-')
}
