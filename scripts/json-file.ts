import { existsSync, readFileSync, renameSync, writeFileSync } from 'node:fs'
import type { z } from 'zod'

/** A small file of our own; undefined when it is missing or was cut off, since each of them can be made again. */
export function readJson<T>(file: string, schema: z.ZodType<T>): T | undefined {
  if (!existsSync(file)) return undefined
  try {
    return schema.safeParse(JSON.parse(readFileSync(file, 'utf8'))).data
  } catch (error) {
    if (error instanceof SyntaxError) return undefined
    throw error
  }
}

/** Writes it whole or not at all, readable by its owner alone. */
export function writeSecretJson(file: string, content: unknown): void {
  writeFileSync(`${file}.new`, JSON.stringify(content), { mode: 0o600 })
  renameSync(`${file}.new`, file)
}
