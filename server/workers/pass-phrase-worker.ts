import { parentPort } from 'node:worker_threads'
import { compareSync, hashSync } from 'bcryptjs'
import type { PassPhraseTask } from './pass-phrase-pool.ts'

parentPort?.on('message', ({ id, task }: { id: number; task: PassPhraseTask }) => {
  const result = task.kind === 'hash' ? hashSync(task.text, task.cost) : compareSync(task.text, task.hash)
  parentPort?.postMessage({ id, result })
})
