import { randomBytes } from 'node:crypto'
import { Balance } from '#server/models/balance.ts'
import { BalanceCheck } from '#server/models/balance-check.ts'
import { Batch } from '#server/models/batch.ts'
import { ControlPlan } from '#server/models/control-plan.ts'
import { Machine } from '#server/models/machine.ts'
import { Product } from '#server/models/product.ts'
import { ShellLot } from '#server/models/shell-lot.ts'
import { Site } from '#server/models/site.ts'
import { ToolingSet } from '#server/models/tooling-set.ts'
import { User } from '#server/models/user.ts'
import { UserRole } from '#server/models/user-role.ts'
import { hashPassPhrase } from '#server/services/sign-in/pass-phrase-hash.ts'
import type { Role } from '#shared/permissions.ts'

/** Different each time, so that tests never meet each other's records. */
function code(prefix: string): string {
  return `${prefix}-${randomBytes(4).toString('hex')}`
}

/** A pass-phrase that satisfies the rules. */
export const PASS_PHRASE = 'brown bread, bore seven'

export function buildSite(fields: Partial<Pick<Site, 'name' | 'timeZone'>> = {}): Promise<Site> {
  return Site.create({ code: randomBytes(4).toString('hex'), name: 'Ashlar Fen Oral Solids', timeZone: 'Europe/Dublin', ...fields })
}

export interface UserFields {
  site: Site
  roles: readonly Role[]
  name?: string
  /** Sign-in through the API needs a real hash; most tests do not, and hashing is slow on purpose. */
  passPhrase?: string
}

export async function buildUser({ site, roles, name = code('Person'), passPhrase }: UserFields): Promise<User> {
  const passPhraseHash = passPhrase === undefined ? 'none' : await hashPassPhrase(passPhrase)
  const user = await User.create({ email: `${code('person')}@ashlarfen.example`, name, passPhraseHash })
  for (const role of roles) await UserRole.create({ userId: user.id, siteId: site.id, role })
  return user
}

export function buildMachine(site: Site, fields: Partial<Pick<Machine, 'boresPerGroup' | 'segments' | 'indexesPerMinute'>> = {}): Promise<Machine> {
  return Machine.create({
    siteId: site.id,
    code: code('F'),
    name: 'Filler',
    boresPerGroup: 12,
    segments: 12,
    indexesPerMinute: 80,
    scaleMinMm: 0,
    scaleMaxMm: 30,
    ...fields,
  })
}

export function buildToolingSet(site: Site): Promise<ToolingSet> {
  return ToolingSet.create({ siteId: site.id, code: code('A'), capsuleSize: '0', boresPerGroup: 12, discThicknessMm: 18.5 })
}

export function buildShellLot(site: Site, fields: { tareMeanMg?: number; tareSdMg?: number } = {}): Promise<ShellLot> {
  const { tareMeanMg = 96, tareSdMg = 2.5 } = fields
  const tare = { tareVersion: 1, tareN: 50, tareMeanMg, tareSdMg, tareWeighedAt: new Date() }
  return ShellLot.create({ siteId: site.id, code: code('8'), capsuleSize: '0', material: 'gelatin', ...tare })
}

export function buildProduct(site: Site, fields: { targetFillMg?: number } = {}): Promise<Product> {
  const { targetFillMg = 400 } = fields
  return Product.create({
    siteId: site.id,
    code: code('AF'),
    name: 'Test capsules',
    capsuleSize: '0',
    targetFillMg,
    lowerSpecificationMg: targetFillMg * 0.9,
    upperSpecificationMg: targetFillMg * 1.1,
    labelClaims: [{ active: 'Active A', claimMg: targetFillMg / 2 }],
    acceptanceStandards: ['usp-905-weight', 'ph-eur-2.9.5'],
  })
}

export type PlanFields = Partial<Pick<ControlPlan, 'basis' | 'sampleSize' | 'chart' | 'runTests' | 'state'>>

export async function buildControlPlan(site: Site, product: Product, fields: PlanFields = {}): Promise<ControlPlan> {
  const engineer = await buildUser({ site, roles: ['engineer'] })
  const qa = await buildUser({ site, roles: ['qa'] })
  return ControlPlan.create({
    productId: product.id,
    planVersion: 1 + (await ControlPlan.count({ where: { productId: product.id } })),
    state: 'approved',
    basis: 'net-mean-tare',
    sampleSize: 12,
    startUpSampleSize: 24,
    intervalMinutes: 30,
    chart: 'xbar-s',
    runTests: [1, 2, 3],
    meanAlertPercent: 3,
    meanActionPercent: 5,
    individualAlertPercent: 7.5,
    individualActionPercent: 10,
    rsdAlertPercent: 3,
    rsdActionPercent: 4,
    reactionSteps: ['Weigh a sample of double size at once.', 'Look at the last events.'],
    statisticalGround: 'Twelve capsules see a shift of one sigma within two samples, nine times in ten.',
    proposedById: engineer.id,
    approvedById: qa.id,
    approvedAt: new Date(),
    ...fields,
  })
}

export async function buildBalance(site: Site, fields: { readabilityMg?: number } = {}): Promise<Balance> {
  const { readabilityMg = 0.1 } = fields
  const balance = await Balance.create({
    siteId: site.id,
    code: code('B'),
    description: 'Bench balance',
    readabilityMg,
    repeatabilitySdMg: 0.04,
    capacityMg: 220_000,
    calibrationDueOn: '2099-12-31',
  })
  const checker = await buildUser({ site, roles: ['operator'] })
  await BalanceCheck.create({
    balanceId: balance.id,
    kind: 'daily',
    checkedAt: new Date(),
    checkedById: checker.id,
    nominalMg: 500,
    readingMg: 500.1,
    toleranceMg: 0.5,
    hasPassed: true,
  })
  return balance
}

export interface Run {
  site: Site
  machine: Machine
  toolingSet: ToolingSet
  shellLot: ShellLot
  product: Product
  plan: ControlPlan
  balance: Balance
  batch: Batch
}

/** A running batch with everything that it needs: start-up approved, two hours old. */
export async function buildRun(fields: { site?: Site; plan?: PlanFields; batch?: Partial<Pick<Batch, 'state'>> } = {}): Promise<Run> {
  const site = fields.site ?? (await buildSite())
  const machine = await buildMachine(site)
  const toolingSet = await buildToolingSet(site)
  const shellLot = await buildShellLot(site)
  const product = await buildProduct(site)
  const plan = await buildControlPlan(site, product, fields.plan)
  const balance = await buildBalance(site)
  const engineer = await buildUser({ site, roles: ['engineer'] })
  const startedAt = new Date(Date.now() - 2 * 3_600_000)
  const batch = await Batch.create({
    siteId: site.id,
    number: code('F2'),
    machineId: machine.id,
    productId: product.id,
    controlPlanId: plan.id,
    toolingSetId: toolingSet.id,
    shellLotId: shellLot.id,
    blendLot: code('BL'),
    state: 'running',
    plannedCapsules: 600_000,
    indexesPerMinute: 80,
    startedAt,
    startUpApprovedAt: startedAt,
    startUpApprovedById: engineer.id,
    ...fields.batch,
  })
  return { site, machine, toolingSet, shellLot, product, plan, balance, batch }
}
