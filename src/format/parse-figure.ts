const FIGURE = /^[+-]?(\d+([.,]\d*)?|[.,]\d+)$/

/** The number that a person typed, with a decimal point or comma; undefined where it is none. Thousands are not grouped. */
export function parseFigure(text: string): number | undefined {
  const typed = text.trim().replace('−', '-')
  return FIGURE.test(typed) ? Number(typed.replace(',', '.')) : undefined
}

const WEIGHTS = /[\s;|\t]+|,\s+/

/** A list of weights as pasted from a sheet or typed one after the other: which are numbers, and which words are none. */
export function parseWeights(text: string): { weightsMg: number[]; unread: string[] } {
  const words = text.split(WEIGHTS).filter((word) => word !== '')
  const read = words.map((word) => ({ word, figure: parseFigure(word.replace(/,$/, '')) }))
  return {
    weightsMg: read.flatMap(({ figure }) => (figure === undefined ? [] : [figure])),
    unread: read.filter(({ figure }) => figure === undefined).map(({ word }) => word),
  }
}
