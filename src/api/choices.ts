import { api } from './client.ts'

/** What a form offers to choose from; the pages of the masters themselves know more. */
export interface Choice {
  id: string
  code: string
  name?: string
  capsuleSize?: string
  boresPerGroup?: number
  isActive: boolean
}

const list = (path: string) => (siteId: string | undefined, signal?: AbortSignal) =>
  api.get<Choice[]>(path, { query: { siteId }, ...(signal ? { signal } : {}) })

export const fetchMachineChoices = list('/machines')
export const fetchToolingSetChoices = list('/tooling-sets')
export const fetchProductChoices = list('/products')
export const fetchShellLotChoices = list('/shell-lots')
