import { register } from 'tsx/esm/api'

// A thread does not inherit the loader that lets the main thread read TypeScript, so it registers its own first.
register()
await import('./simulation.ts')
