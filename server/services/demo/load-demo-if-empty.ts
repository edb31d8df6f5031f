import type { Config } from '../../config.ts'
import { Site } from '../../models/site.ts'

/** Loads the demo scenario when the database holds no site yet. */
export async function loadDemoIfEmpty(_config: Config): Promise<void> {
  if ((await Site.count()) > 0) return
}
