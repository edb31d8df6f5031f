import type { Scenario, ScenarioBalance, ScenarioProduct, ScenarioShellLot } from '#fixtures/scenario/records.ts'
import { summarise } from '#shared/statistics/summary.ts'
import { Balance } from '../../models/balance.ts'
import { BalanceCheck } from '../../models/balance-check.ts'
import { ControlPlan } from '../../models/control-plan.ts'
import { Machine } from '../../models/machine.ts'
import { newId } from '../../models/new-id.ts'
import { Product } from '../../models/product.ts'
import { ReviewAction } from '../../models/review-action.ts'
import { ShellLot } from '../../models/shell-lot.ts'
import { ShellWeight } from '../../models/shell-weight.ts'
import { ToolingPart } from '../../models/tooling-part.ts'
import { ToolingSet } from '../../models/tooling-set.ts'
import { chainOf } from '../audit.ts'
import type { AuditBook } from './audit-book.ts'
import type { DemoPeople } from './demo-people.ts'
import { insertAll } from './insert-all.ts'

export interface DemoContext {
  siteId: string
  /** When the masters were set up: before the first batch. */
  setUpAt: Date
  people: DemoPeople
  book: AuditBook
}

/** Identifiers by the codes that the scenario uses. */
export interface DemoMasters {
  machines: ReadonlyMap<string, string>
  toolingSets: ReadonlyMap<string, string>
  shellLots: ReadonlyMap<string, string>
  products: ReadonlyMap<string, { id: string; planId: string; product: ScenarioProduct }>
  balances: ReadonlyMap<string, string>
  /** Checks of each balance, oldest first. */
  checks: ReadonlyMap<string, readonly { id: string; checkedAt: Date; hasPassed: boolean }[]>
}

/** The identifier that belongs to a code of the scenario. */
export function idOf(ids: ReadonlyMap<string, string>, code: string): string {
  const id = ids.get(code)
  if (id === undefined) throw new Error(`The scenario names ${code}, but holds no such record.`)
  return id
}

/** Stores sites' machines, tooling, shells, products with their plans, and balances with their checks. */
export async function storeMasters(scenario: Scenario, context: DemoContext): Promise<DemoMasters> {
  const { siteId, setUpAt } = context
  const withId = <T extends object>(rows: readonly T[]) =>
    rows.map((row) => ({ ...row, id: newId(), siteId, createdAt: setUpAt, updatedAt: setUpAt }))
  const machines = withId(scenario.machines)
  const toolingSets = withId(scenario.toolingSets)
  await insertAll(Machine, machines)
  await insertAll(ToolingSet, toolingSets)
  await insertAll(
    ToolingPart,
    toolingSets.flatMap(({ id, parts }) => parts.map((part) => ({ ...part, toolingSetId: id }))),
  )
  for (const { id, code, name } of machines) noteMaster(context, 'machine', id, { code, name })
  for (const { id, code, capsuleSize } of toolingSets) noteMaster(context, 'tooling-set', id, { code, capsuleSize })
  const shellLots = await storeShellLots(withId(scenario.shellLots), context)
  const products = await storeProducts(withId(scenario.products), context)
  const { balances, checks } = await storeBalances(withId(scenario.balances), context)
  await storeReviewActions(scenario, context)
  return { machines: codes(machines), toolingSets: codes(toolingSets), shellLots, products, balances, checks }
}

type Stored<T> = T & { id: string; siteId: string; createdAt: Date; updatedAt: Date }

function codes(rows: readonly { code: string; id: string }[]): ReadonlyMap<string, string> {
  return new Map(rows.map(({ code, id }) => [code, id]))
}

function noteMaster({ book, siteId, setUpAt }: DemoContext, kind: string, id: string, now: object): void {
  book.note(setUpAt, null, { chain: chainOf.masters(siteId), action: `${kind}:create`, record: { kind, id }, new: now })
}

async function storeShellLots(lots: readonly Stored<ScenarioShellLot>[], context: DemoContext): Promise<ReadonlyMap<string, string>> {
  const rows = lots.map(({ tares, ...lot }) => {
    const last = tares.at(-1)
    if (!last) return lot
    const { n, mean, sd } = summarise(last.weightsMg)
    return { ...lot, tareVersion: tares.length, tareN: n, tareMeanMg: mean, tareSdMg: sd, tareWeighedAt: last.weighedAt }
  })
  await insertAll(ShellLot, rows)
  await insertAll(
    ShellWeight,
    lots.flatMap(({ id, tares }) =>
      tares.flatMap(({ weightsMg }, tare) =>
        weightsMg.map((weightMg, place) => ({ shellLotId: id, tareVersion: tare + 1, ordinal: place + 1, weightMg })),
      ),
    ),
  )
  for (const { id, code, capsuleSize, tares } of lots) {
    noteMaster(context, 'shell-lot', id, { code, capsuleSize })
    for (const [place, { weighedAt, weightsMg }] of tares.entries()) {
      const { n, mean, sd } = summarise(weightsMg)
      context.book.note(weighedAt, context.people.find('Operator 3'), {
        ...{ chain: chainOf.masters(context.siteId), action: 'shell-lot:tare', record: { kind: 'shell-lot', id } },
        new: { tareVersion: place + 1, tareN: n, tareMeanMg: mean, tareSdMg: sd },
      })
    }
  }
  return codes(lots)
}

async function storeProducts(products: readonly Stored<ScenarioProduct>[], context: DemoContext): Promise<DemoMasters['products']> {
  const { book, people, siteId, setUpAt } = context
  await insertAll(Product, products)
  const plans = products.map(({ id: productId, plan: { proposedBy, approvedBy, ...plan } }) => ({
    ...plan,
    ...{ id: newId(), productId, planVersion: 1, state: 'approved' as const },
    ...{ proposedById: people.find(proposedBy).id, approvedById: people.find(approvedBy).id, createdAt: setUpAt, updatedAt: setUpAt },
  }))
  await insertAll(ControlPlan, plans)
  for (const [place, { id, code, name, targetFillMg, plan }] of products.entries()) {
    noteMaster(context, 'product', id, { code, name, targetFillMg })
    const record = { kind: 'control-plan', id: plans[place]?.id ?? '' }
    const chain = chainOf.masters(siteId)
    book.note(setUpAt, people.find(plan.proposedBy), {
      chain,
      action: 'control-plan:propose',
      record,
      new: { productId: id, planVersion: 1 },
    })
    book.note(plan.approvedAt, people.find(plan.approvedBy), { chain, action: 'control-plan:approve', record, new: { state: 'approved' } })
  }
  return new Map(products.map((product, place) => [product.code, { id: product.id, planId: plans[place]?.id ?? '', product }]))
}

async function storeBalances(
  balances: readonly Stored<ScenarioBalance>[],
  context: DemoContext,
): Promise<Pick<DemoMasters, 'balances' | 'checks'>> {
  const { book, people, siteId } = context
  await insertAll(Balance, balances)
  const checks = balances.flatMap(({ id: balanceId, checks: done }) =>
    done.map(({ checkedBy, ...check }) => ({ ...check, id: newId(), balanceId, checkedById: people.find(checkedBy).id, checkedBy })),
  )
  await insertAll(BalanceCheck, checks)
  for (const { id, code } of balances) noteMaster(context, 'balance', id, { code })
  for (const { id, balanceId, kind, checkedAt, checkedBy, nominalMg, readingMg, toleranceMg, hasPassed } of checks) {
    const record = { kind: 'balance-check', id }
    const now = { balanceId, kind, nominalMg, readingMg, toleranceMg, hasPassed }
    book.note(checkedAt, people.find(checkedBy), { chain: chainOf.balances(siteId), action: 'balance:check', record, new: now })
  }
  const checksOf = (balanceId: string) => checks.filter((check) => check.balanceId === balanceId)
  return { balances: codes(balances), checks: new Map(balances.map(({ id, code }) => [code, checksOf(id)])) }
}

async function storeReviewActions({ reviewActions }: Scenario, { siteId, people, book }: DemoContext): Promise<void> {
  const rows = reviewActions.map(({ createdBy, ...action }) => {
    const createdAt = new Date(`${action.dueOn}T00:00:00Z`)
    createdAt.setUTCDate(createdAt.getUTCDate() - 12)
    return {
      ...action,
      id: newId(),
      siteId,
      createdBy,
      createdById: people.find(createdBy).id,
      createdAt,
      updatedAt: action.closedAt ?? createdAt,
    }
  })
  await insertAll(ReviewAction, rows)
  for (const { id, title, owner, dueOn, createdAt, createdBy } of rows) {
    const record = { kind: 'review-action', id }
    book.note(createdAt, people.find(createdBy), {
      chain: chainOf.reviews(siteId),
      action: 'review-action:create',
      record,
      new: { title, owner, dueOn },
    })
  }
}
