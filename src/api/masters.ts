import type { BalanceAnswer, BalanceDetail, CreateBalance, RecordBalanceCheck, UpdateBalance } from '#shared/schemas/balances.ts'
import type { ApproveControlPlan, ControlPlanAnswer, ProposeControlPlan, WithdrawControlPlan } from '#shared/schemas/control-plans.ts'
import type { CreateMachine, MachineAnswer, UpdateMachine } from '#shared/schemas/machines.ts'
import type { CreateProduct, ProductAnswer, UpdateProduct } from '#shared/schemas/products.ts'
import type { CreateShellLot, RecordTare, ShellLotAnswer, ShellLotDetail, UpdateShellLot } from '#shared/schemas/shell-lots.ts'
import type { CreateSite, SiteAnswer, UpdateSite } from '#shared/schemas/sites.ts'
import type { CreateToolingSet, InspectPart, ToolingSetAnswer, UpdateToolingSet } from '#shared/schemas/tooling-sets.ts'
import { api } from './client.ts'

/** The masters: lists of one site, single records, and what changes them. A key is kept over the retries of one deed. */
const list =
  <T>(path: string) =>
  (siteId: string, signal?: AbortSignal) =>
    api.get<T[]>(path, { query: { siteId }, ...(signal ? { signal } : {}) })
const one =
  <T>(path: string) =>
  (id: string, signal?: AbortSignal) =>
    api.get<T>(`${path}/${id}`, signal ? { signal } : {})
type Create<R, A> = (request: R, idempotencyKey: string) => Promise<A>
type Update<R, A> = (id: string, request: R) => Promise<A>
const create =
  <A>(path: string) =>
  (request: object, idempotencyKey: string) =>
    api.post<A>(path, request, { idempotencyKey })
const update =
  <A>(path: string) =>
  (id: string, request: object) =>
    api.put<A>(`${path}/${id}`, request)

export const fetchSites = (signal?: AbortSignal) => api.get<SiteAnswer[]>('/sites', signal ? { signal } : {})
export const createSite: Create<CreateSite, SiteAnswer> = create<SiteAnswer>('/sites')
export const updateSite: Update<UpdateSite, SiteAnswer> = update<SiteAnswer>('/sites')

export const fetchMachines = list<MachineAnswer>('/machines')
export const createMachine: Create<CreateMachine, MachineAnswer> = create<MachineAnswer>('/machines')
export const updateMachine: Update<UpdateMachine, MachineAnswer> = update<MachineAnswer>('/machines')

export const fetchToolingSets = list<ToolingSetAnswer>('/tooling-sets')
export const createToolingSet: Create<CreateToolingSet, ToolingSetAnswer> = create<ToolingSetAnswer>('/tooling-sets')
export const updateToolingSet: Update<UpdateToolingSet, ToolingSetAnswer> = update<ToolingSetAnswer>('/tooling-sets')
export const inspectPart = (setId: string, partId: string, request: InspectPart, idempotencyKey: string) =>
  api.post<ToolingSetAnswer>(`/tooling-sets/${setId}/parts/${partId}/inspections`, request, { idempotencyKey })

export const fetchShellLots = list<ShellLotAnswer>('/shell-lots')
export const fetchShellLot = one<ShellLotDetail>('/shell-lots')
export const createShellLot: Create<CreateShellLot, ShellLotAnswer> = create<ShellLotAnswer>('/shell-lots')
export const updateShellLot: Update<UpdateShellLot, ShellLotAnswer> = update<ShellLotAnswer>('/shell-lots')
export const recordTare = (id: string, request: RecordTare, idempotencyKey: string) =>
  api.post<ShellLotDetail>(`/shell-lots/${id}/tares`, request, { idempotencyKey })
export const uploadTareFile = (id: string, form: FormData, idempotencyKey: string) =>
  api.upload<ShellLotDetail>(`/shell-lots/${id}/tare-files`, form, { idempotencyKey })

export const fetchProducts = list<ProductAnswer>('/products')
export const createProduct: Create<CreateProduct, ProductAnswer> = create<ProductAnswer>('/products')
export const updateProduct: Update<UpdateProduct, ProductAnswer> = update<ProductAnswer>('/products')

export const fetchControlPlans = list<ControlPlanAnswer>('/control-plans')
export const fetchControlPlan = one<ControlPlanAnswer>('/control-plans')
export const proposeControlPlan: Create<ProposeControlPlan, ControlPlanAnswer> = create<ControlPlanAnswer>('/control-plans')
export const approveControlPlan = (id: string, request: ApproveControlPlan, idempotencyKey: string) =>
  api.post<ControlPlanAnswer>(`/control-plans/${id}/approval`, request, { idempotencyKey })
export const withdrawControlPlan = (id: string, request: WithdrawControlPlan, idempotencyKey: string) =>
  api.post<ControlPlanAnswer>(`/control-plans/${id}/withdrawal`, request, { idempotencyKey })

export const fetchBalances = list<BalanceAnswer>('/balances')
export const fetchBalance = one<BalanceDetail>('/balances')
export const createBalance: Create<CreateBalance, BalanceAnswer> = create<BalanceAnswer>('/balances')
export const updateBalance: Update<UpdateBalance, BalanceAnswer> = update<BalanceAnswer>('/balances')
export const recordBalanceCheck = (id: string, request: RecordBalanceCheck, idempotencyKey: string) =>
  api.post<BalanceDetail>(`/balances/${id}/checks`, request, { idempotencyKey })
