import { join } from 'node:path'
import type { Config } from '../../config.ts'
import { Site } from '../../models/site.ts'
import { loadDemo } from './load-demo.ts'

/** One scenario for everybody; only the moment and the pass-phrases differ. */
const SEED = 20

/** Loads the demo scenario when the database holds no site yet. */
export async function loadDemoIfEmpty(config: Config): Promise<void> {
  if ((await Site.count()) > 0) return
  await loadDemo({ now: new Date(), seed: SEED, signInsFile: join(config.dataDirectory, 'demo-sign-ins.json') })
}
