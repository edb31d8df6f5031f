import { api } from './client.ts'

/** What the weighing pages need of a balance; its own pages know more. */
export interface BalanceChoice {
  id: string
  code: string
  description: string
  readabilityMg: number
  state: 'in-use' | 'out-of-use'
  calibrationDueOn: string
}

export const fetchBalanceChoices = (siteId: string | undefined, signal?: AbortSignal) =>
  api.get<BalanceChoice[]>('/balances', { query: { siteId }, ...(signal ? { signal } : {}) })
