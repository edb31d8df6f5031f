import { generateScenario } from '#fixtures/scenario/generate-scenario.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { newId } from '../../models/new-id.ts'
import { Site } from '../../models/site.ts'
import { chainOf } from '../audit.ts'
import { AuditBook } from './audit-book.ts'
import { storePeople, writeSignIns, type DemoSignIn } from './demo-people.ts'
import { storeBatches } from './store-batches.ts'
import { storeChangeovers } from './store-changeovers.ts'
import { storeDecisions } from './store-decisions.ts'
import { storeMasters } from './store-masters.ts'
import { storeSignals } from './store-signals.ts'

export interface DemoOptions {
  now: Date
  seed: number
  /** Where the sign-ins are kept. */
  signInsFile: string
}

const SET_UP_DAYS_BEFORE = 71
const DAY_MS = 86_400_000

/**
 * Stores the demo scenario on an empty database, all of it or nothing, with the audit trail that the services would
 * have written, and keeps one sign-in a role in a file that only its owner can read.
 * @returns the sign-ins; pass-phrases are new at each installation
 */
export async function loadDemo({ now, seed, signInsFile }: DemoOptions): Promise<DemoSignIn[]> {
  const scenario = generateScenario({ now, seed })
  const setUpAt = new Date(now.getTime() - SET_UP_DAYS_BEFORE * DAY_MS)
  const signIns = await inTransaction(async () => {
    const book = new AuditBook()
    const siteId = newId()
    await Site.create({ id: siteId, ...scenario.site, createdAt: setUpAt, updatedAt: setUpAt })
    book.note(setUpAt, null, {
      chain: chainOf.masters(siteId),
      action: 'site:create',
      record: { kind: 'site', id: siteId },
      new: scenario.site,
    })
    const people = await storePeople(scenario.people, { siteId, at: setUpAt, book })
    const context = { siteId, setUpAt, people, book }
    const masters = await storeMasters(scenario, context)
    const batches = await storeBatches(scenario.batches, masters, context)
    await storeSignals(batches, context, now)
    await storeChangeovers(scenario.changeovers, { masters, context, batches })
    await storeDecisions(batches, context)
    await book.store()
    return people.signIns
  })
  await writeSignIns(signInsFile, signIns)
  return signIns
}
