import type { Request, Response } from 'express'
import type { EventStream } from './client.ts'

const HEARTBEAT_MS = 25_000
const RECONNECT_MS = 2_000

/** Server-sent events (HTML standard): headers, a reconnect hint, a heartbeat, and one frame an event. */
export function openEventStream(request: Request, response: Response): EventStream {
  response.status(200).set({ 'Content-Type': 'text/event-stream; charset=utf-8', 'Cache-Control': 'no-store', 'X-Accel-Buffering': 'no' })
  response.flushHeaders()
  response.write(`retry: ${RECONNECT_MS}\n\n`)
  const heartbeat = setInterval(() => response.write(': still here\n\n'), HEARTBEAT_MS)
  response.on('close', () => clearInterval(heartbeat))
  return {
    lastEventId: request.get('last-event-id'),
    send: ({ id, name, data }) => {
      response.write(`${id === undefined ? '' : `id: ${id}\n`}event: ${name}\ndata: ${JSON.stringify(data)}\n\n`)
    },
    close: () => void response.end(),
  }
}
