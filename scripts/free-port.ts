import { createServer } from 'node:net'
import { SetUpError } from './set-up-error.ts'

/** A port of the loopback interface that nobody listens on at this moment. */
export function freePort(): Promise<number> {
  return new Promise((resolve, reject) => {
    const server = createServer()
    server.once('error', reject)
    server.listen(0, '127.0.0.1', () => {
      const address = server.address()
      const port = typeof address === 'object' && address !== null ? address.port : 0
      server.close(() => resolve(port))
    })
  })
}

function canListen(host: string, port: number): Promise<boolean> {
  return new Promise((resolve) => {
    const server = createServer()
    server.once('error', () => resolve(false))
    server.listen(port, host, () => server.close(() => resolve(true)))
  })
}

/** @throws {SetUpError} with what to set instead, when a port cannot be listened on */
export async function requireFreePort(host: string, port: number, command: string): Promise<void> {
  if (await canListen(host, port)) return
  const other = port < 65_535 ? port + 1 : port - 1
  throw new SetUpError(
    `Port ${port} of ${host} cannot be used, most likely since another program has it: choose one, as in \`PORT=${other} ${command}\`.`,
  )
}
