import { LiveEvent } from '../models/live-event.ts'

/** Tells open pages, through the events table that every instance tails, that something changed. */
export async function publishEvent(event: { siteId: string; kind: string; subjectId: string; batchId: string | null }): Promise<void> {
  await LiveEvent.create({ ...event, createdAt: new Date() })
}
