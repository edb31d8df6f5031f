import { readFileSync } from 'node:fs'
import { BalanceFileMapping } from '#shared/schemas/balance-files.ts'
import { BalanceFileProblems } from '#server/balance-files/problems.ts'
import { readWholeBalanceFile, type ReadOptions } from '#server/balance-files/read.ts'

export const NOW = new Date('2026-12-01T12:00:00Z')

/** The bytes of one of the invented files. */
export function fixture(name: string): Uint8Array {
  return readFileSync(new URL(`../../../../fixtures/balance-files/${name}`, import.meta.url))
}

export function bytesOf(text: string): Uint8Array {
  return new TextEncoder().encode(text)
}

/** A valid mapping of a file with the columns "weight" in mg, changed where the test says. */
export function mapping(changes: Partial<Record<keyof BalanceFileMapping, unknown>> = {}): BalanceFileMapping {
  return BalanceFileMapping.parse({ delimiter: ',', decimal: '.', headerRow: 1, columns: { weight: 'weight' }, unit: 'mg', ...changes })
}

export function readText(text: string, how: BalanceFileMapping, options: Partial<ReadOptions> = {}) {
  return readWholeBalanceFile(bytesOf(text), how, { now: NOW, ...options })
}

/** The refusal of a file, which must be one. */
export async function refusalOf(reading: Promise<unknown>): Promise<BalanceFileProblems> {
  const outcome: unknown = await reading.then(
    () => 'it was taken',
    (error: unknown) => error,
  )
  if (!(outcome instanceof BalanceFileProblems)) throw new Error(`expected a refusal, but ${String(outcome)}`)
  return outcome
}

/** What tests compare of a refusal: code, line and column of each problem. */
export async function problemsOf(reading: Promise<unknown>): Promise<string[]> {
  const { problems } = await refusalOf(reading)
  return problems.map(({ code, line, column }) => `${code} ${line} ${column}`)
}
