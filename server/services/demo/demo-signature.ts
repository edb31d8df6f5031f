import { newId } from '../../models/new-id.ts'
import { contentHash } from '../signatures.ts'
import type { DemoPeople } from './demo-people.ts'

export interface DemoSigning {
  siteId: string
  meaning: string
  reason?: string
  record: { kind: string; id: string }
  content: object
  signedAt: Date
}

/** A signature of the demo: as a person's, but made by the loader under a session that was never open. */
export function demoSignature(
  person: ReturnType<DemoPeople['find']>,
  { siteId, meaning, reason = '', record, content, signedAt }: DemoSigning,
) {
  return {
    ...{ id: newId(), siteId, userId: person.id, printedName: person.name, meaning, reason },
    ...{ recordKind: record.kind, recordId: record.id, contentHash: contentHash(content), signedAt, sessionId: person.sessionId },
  }
}
