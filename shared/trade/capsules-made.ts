import type { MachineEventKind } from '../vocabulary.ts'

/** An event that starts, stops or changes the speed of a machine. */
export interface SpeedEvent {
  kind: MachineEventKind
  atMs: number
  /** New speed in indexes a minute, of a speed event. */
  speed?: number | null
}

/**
 * Capsules made from the start of a run to a moment: bores × indexes, while the machine ran.
 *
 * Formula  Σ over the stretches between events of minutes running × indexes a minute × bores a group; a run starts running.
 * @param events in order of time
 */
export function capsulesMade(
  run: { startedAtMs: number; indexesPerMinute: number; boresPerGroup: number },
  events: readonly SpeedEvent[],
  atMs: number,
): number {
  let speed = run.indexesPerMinute
  let isRunning = true
  let since = run.startedAtMs
  let indexes = 0
  for (const event of events) {
    if (event.atMs > atMs) break
    if (event.atMs > since) {
      if (isRunning) indexes += ((event.atMs - since) / 60_000) * speed
      since = event.atMs
    }
    if (event.kind === 'stop') isRunning = false
    if (event.kind === 'start') isRunning = true
    if (event.kind === 'speed' && event.speed) speed = event.speed
  }
  if (isRunning && atMs > since) indexes += ((atMs - since) / 60_000) * speed
  return Math.max(0, Math.round(indexes * run.boresPerGroup))
}
