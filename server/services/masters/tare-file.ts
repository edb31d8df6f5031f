import { BalanceFileMapping } from '#shared/schemas/balance-files.ts'
import type { RecordTareFile } from '#shared/schemas/shell-lots.ts'
import { previewBalanceFile } from '../../balance-files/preview.ts'
import { BalanceFileProblems } from '../../balance-files/problems.ts'
import { readWholeBalanceFile } from '../../balance-files/read.ts'
import { BalanceFileRefusedError } from '../../errors.ts'

/**
 * The weights in mg of a CSV of one column, with or without a line that names it. Unit and decimal sign are said by a
 * person, never guessed; anything that is not a weight refuses the file as a whole, line by line.
 * @throws {BalanceFileRefusedError} with every problem: line, what was found, what was expected
 */
export async function readTareFile(bytes: Uint8Array, { unit, decimal }: RecordTareFile): Promise<number[]> {
  const now = new Date()
  const { guess } = await previewBalanceFile(bytes, { now })
  const headerRow = guess?.headerRow ?? null
  // One column needs no delimiter; a semicolon never stands in a number.
  const mapping = BalanceFileMapping.parse({ delimiter: ';', decimal, headerRow, columns: { weight: 1 }, unit })
  try {
    const { rows } = await readWholeBalanceFile(bytes, mapping, { now })
    return rows.map(({ weightMg }) => weightMg)
  } catch (error) {
    if (error instanceof BalanceFileProblems) throw new BalanceFileRefusedError(error)
    throw error
  }
}
