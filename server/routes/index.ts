import packageJson from '../../package.json' with { type: 'json' }
import type { Config } from '../config.ts'
import type { Endpoint } from '../http/endpoint.ts'
import { aboutEndpoints } from './about.ts'
import { apiDescriptionEndpoints } from './api-description.ts'
import { authEndpoints } from './auth.ts'
import { balanceEndpoints } from './balances.ts'
import { batchEndpoints } from './batches.ts'
import { calculationEndpoints } from './calculations/index.ts'
import { changeoverEndpoints } from './changeovers.ts'
import { controlPlanEndpoints } from './control-plans.ts'
import { healthEndpoints } from './health.ts'
import { machineEventEndpoints } from './machine-events.ts'
import { machineEndpoints } from './machines.ts'
import { productEndpoints } from './products.ts'
import { mailEndpoints } from './mail.ts'
import { releaseEndpoints } from './release.ts'
import { reviewEndpoints } from './reviews.ts'
import { sampleEndpoints } from './samples.ts'
import { shellLotEndpoints } from './shell-lots.ts'
import { signalEndpoints } from './signals.ts'
import { siteEndpoints } from './sites.ts'
import { toolingSetEndpoints } from './tooling-sets.ts'
import { userEndpoints } from './users.ts'
import { watchEndpoints } from './watch.ts'
import { weighingFileEndpoints } from './weighing-files.ts'

/** Every endpoint of the API: the router, the API description and the role table of the tests all read this list. */
export function allEndpoints(config: Config): Endpoint[] {
  const endpoints = [
    ...healthEndpoints,
    ...aboutEndpoints(config),
    ...authEndpoints(config),
    ...siteEndpoints,
    ...userEndpoints,
    ...machineEndpoints,
    ...toolingSetEndpoints,
    ...shellLotEndpoints,
    ...productEndpoints,
    ...controlPlanEndpoints,
    ...balanceEndpoints,
    ...batchEndpoints,
    ...changeoverEndpoints,
    ...machineEventEndpoints,
    ...sampleEndpoints,
    ...signalEndpoints,
    ...weighingFileEndpoints,
    ...watchEndpoints,
    ...releaseEndpoints(config),
    ...reviewEndpoints,
    ...mailEndpoints(config),
    ...calculationEndpoints,
  ]
  return [...endpoints, ...apiDescriptionEndpoints(endpoints, config, packageJson.version)]
}
