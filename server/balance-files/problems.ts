import type { BalanceFileNote, BalanceFileProblem, BalanceFileProblemCode } from '#shared/schemas/balance-files.ts'

const MAX_LISTED = 200
const MAX_QUOTED = 80

/** The column name of a problem that is about the file and not about a cell. */
export const WHOLE_FILE = 'file'

export interface ProblemPlace {
  code: BalanceFileProblemCode
  line: number
  column: string
  found: string
  expected: string
}

/** Why a balance file was refused as a whole: every problem up to 200, and how many there were. */
export class BalanceFileProblems extends Error {
  override readonly name = 'BalanceFileProblems'
  constructor(
    readonly problems: readonly BalanceFileProblem[],
    readonly total: number,
    readonly notes: readonly BalanceFileNote[] = [],
  ) {
    const [first] = problems
    const more = total > 1 ? ` (and ${total - 1} more)` : ''
    super(`The file was refused and nothing of it was taken: ${first?.message ?? 'it could not be read.'}${more}`)
  }
}

/** What reading a file brings to light; only the first 200 of each kind are kept, all are counted. */
export class Findings {
  readonly problems: BalanceFileProblem[] = []
  readonly notes: BalanceFileNote[] = []
  problemTotal = 0
  noteTotal = 0

  problem(place: ProblemPlace): void {
    this.problemTotal++
    if (this.problems.length < MAX_LISTED) this.problems.push(describeProblem(place))
  }

  note(line: number, message: string): void {
    this.noteTotal++
    if (this.notes.length < MAX_LISTED) this.notes.push({ line, message })
  }

  refuse(): BalanceFileProblems {
    return new BalanceFileProblems(this.problems, this.problemTotal, this.notes)
  }
}

/** A problem after which the rest of the file cannot be read; it ends the reading at once. */
export class UnreadableError extends Error {
  constructor(readonly place: ProblemPlace) {
    super(place.expected)
  }
}

function describeProblem({ code, line, column, found, expected }: ProblemPlace): BalanceFileProblem {
  const shown = quote(found)
  const where = column === WHOLE_FILE ? (line > 1 ? `Line ${line}` : 'The file') : `Line ${line}, ${column}`
  return { code, line, column, found: shown, expected, message: `${where}: found ${shown || 'nothing'}, expected ${expected}.` }
}

/** Text of a file as a message may carry it: short, on one line, without marks that a terminal or a page would obey. */
export function quote(found: string): string {
  const visible = found.slice(0, MAX_QUOTED + 1).replace(/[\p{Cc}\p{Cf}\p{Zl}\p{Zp}]/gu, '·')
  return visible.length > MAX_QUOTED ? `${visible.slice(0, MAX_QUOTED)}…` : visible
}
