import { mkdirSync, statSync } from 'node:fs'
import { resolve } from 'node:path'
import { SetUpError } from './set-up-error.ts'

/**
 * The folder that holds the data, made if it is missing.
 * @throws {SetUpError} when it cannot be made, or belongs to somebody else and would end up with files of two owners
 */
export function openDataFolder(path: string): string {
  const folder = resolve(path)
  try {
    mkdirSync(folder, { recursive: true })
  } catch (error) {
    const reason = error instanceof Error ? error.message : String(error)
    throw new SetUpError(`The data folder ${folder} cannot be made (${reason}): set DATA_DIRECTORY to a folder that can.`)
  }
  const owner = statSync(folder).uid
  if (process.getuid !== undefined && owner !== process.getuid()) {
    throw new SetUpError(
      `The data folder ${folder} belongs to another user (number ${owner}): start Scruple as that user or set DATA_DIRECTORY to a folder of your own.`,
    )
  }
  return folder
}
