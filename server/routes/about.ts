import { existsSync, readFileSync } from 'node:fs'
import { z } from 'zod'
import { About } from '#shared/schemas/auth.ts'
import packageJson from '../../package.json' with { type: 'json' }
import type { Config } from '../config.ts'
import { openEndpoint, type Endpoint } from '../http/endpoint.ts'

const DemoSignIns = About.shape.demoSignIns.unwrap()

/** Demo sign-ins are shown on this machine alone, and only in demo mode. */
function demoSignIns(config: Config): z.output<typeof DemoSignIns> | undefined {
  const file = `${config.dataDirectory}/demo-sign-ins.json`
  if (!config.isDemo || !existsSync(file)) return undefined
  return DemoSignIns.parse(JSON.parse(readFileSync(file, 'utf8')))
}

/** What the program says of itself before anybody signs in. */
export function aboutEndpoints(config: Config): Endpoint[] {
  return [
    openEndpoint({
      method: 'get',
      path: '/about',
      summary: 'Name, version and whether this is the demo',
      answer: { status: 200, schema: About },
      handle: () => {
        const signIns = demoSignIns(config)
        return { name: 'Scruple', version: packageJson.version, isDemo: config.isDemo, ...(signIns ? { demoSignIns: signIns } : {}) }
      },
    }),
  ]
}
