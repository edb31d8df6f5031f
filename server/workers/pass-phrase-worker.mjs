// JavaScript, since a thread does not inherit the loader that lets the main thread read TypeScript.
import { parentPort } from 'node:worker_threads'
import { compareSync, hashSync } from 'bcryptjs'

parentPort.on('message', ({ id, task }) => {
  const result = task.kind === 'hash' ? hashSync(task.text, task.cost) : compareSync(task.text, task.hash)
  parentPort.postMessage({ id, result })
})
