import { ConfigError } from '#server/config.ts'
import { SetUpError } from './set-up-error.ts'

/** Runs a command to its end. What a person can put right is one sentence, anything else keeps its stack. */
export async function runCommand(command: () => Promise<number>): Promise<never> {
  try {
    process.exit(await command())
  } catch (error) {
    console.error(error instanceof SetUpError || error instanceof ConfigError ? error.message : error)
    process.exit(1)
  }
}

/** Resolves when a person or the machine asks the program to end. Asked again, it goes on tidying up. */
export function askedToStop(): Promise<void> {
  return new Promise((resolve) => {
    for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) process.on(signal, () => resolve())
  })
}
