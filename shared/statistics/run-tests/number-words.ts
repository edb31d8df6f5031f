const WORDS = [
  'zero',
  'one',
  'two',
  'three',
  'four',
  'five',
  'six',
  'seven',
  'eight',
  'nine',
  'ten',
  'eleven',
  'twelve',
  'thirteen',
  'fourteen',
  'fifteen',
  'sixteen',
  'seventeen',
  'eighteen',
  'nineteen',
  'twenty',
] as const

/** A count as a person says it: a word up to twenty, digits above. */
export function inWords(count: number): string {
  return WORDS[count] ?? String(count)
}

/** The same at the head of a sentence. */
export function inWordsFirst(count: number): string {
  const words = inWords(count)
  return words.charAt(0).toUpperCase() + words.slice(1)
}

/** `means` from `mean`; `moving ranges of means` from `moving range of means`. */
export function plural(noun: string): string {
  const [head = noun, ...rest] = noun.split(' of ')
  return [`${head}s`, ...rest].join(' of ')
}
