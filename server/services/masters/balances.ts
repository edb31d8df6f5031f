import type { BalanceAnswer, BalanceDetail, CreateBalance, UpdateBalance } from '#shared/schemas/balances.ts'
import type { SiteQuery } from '#shared/schemas/master-fields.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { ConflictError } from '../../errors.ts'
import { requirePermission, type Actor } from '../../http/actor.ts'
import { Balance } from '../../models/balance.ts'
import { BalanceCheck } from '../../models/balance-check.ts'
import { Product } from '../../models/product.ts'
import { samplesInDoubt } from '../../reads/samples-in-doubt.ts'
import { appendAudit, chainOf } from '../audit.ts'
import { requireVersion } from '../require-version.ts'
import { userNames } from '../user-names.ts'
import { findMaster, readableSites, requireFreeCode } from './master-record.ts'
import { presentBalance, presentBalances, presentCheck } from './present-balance.ts'
import { CHECK_GROUPS, failedGroup, lastCheckOf } from './standing-checks.ts'

const CHECKS_SHOWN = 200

/** The balances of one site or of all where the actor may read, by code. */
export async function listBalances(actor: Actor, { siteId }: SiteQuery): Promise<BalanceAnswer[]> {
  const balances = await Balance.findAll({ where: { siteId: readableSites(actor, siteId) }, order: [['code', 'ASC']] })
  return presentBalances(balances, new Date())
}

/** A balance in full: its checks, what it may weigh, and the samples in doubt after a failed check (requirement C12). */
export async function balanceDetail(balance: Balance): Promise<BalanceDetail> {
  const answer = await presentBalance(balance, new Date())
  const failed = await failedGroup(balance.id)
  const checks = await BalanceCheck.findAll({
    where: { balanceId: balance.id },
    order: [
      ['checkedAt', 'DESC'],
      ['id', 'DESC'],
    ],
    limit: CHECKS_SHOWN,
  })
  const names = await userNames(checks.map(({ checkedById }) => checkedById))
  const products = await Product.findAll({ where: { siteId: balance.siteId, isActive: true }, order: [['code', 'ASC']] })
  return {
    ...answer,
    checks: checks.map((check) => presentCheck(check, names)),
    products: products.map(({ id, code, targetFillMg }) => ({
      ...{ id, code, targetFillMg },
      isBelowMinimum: targetFillMg < answer.minimumWeightMg,
      isNetBelowMinimum: targetFillMg < answer.minimumNetMg,
    })),
    samplesInDoubt: failed === undefined ? [] : await samplesInDoubt(balance.id, CHECK_GROUPS[failed]),
  }
}

/** One balance in full. */
export async function readBalance(actor: Actor, id: string): Promise<BalanceDetail> {
  return balanceDetail(await findMaster(Balance, actor, { permission: 'record:read', kind: 'balance', id }))
}

/** A new balance; it stands out of use until its first check has passed. */
export async function createBalance(actor: Actor, fields: CreateBalance): Promise<BalanceAnswer> {
  const { siteId, code } = fields
  requirePermission(actor, 'balance:write', { siteId, kind: 'site', id: siteId })
  return inTransaction(async () => {
    requireFreeCode('balance', await Balance.findOne({ where: { siteId, code } }), { code })
    const balance = await Balance.create({ ...fields, state: 'out-of-use' })
    const record = { kind: 'balance', id: balance.id }
    await appendAudit({ actor, chain: chainOf.balances(siteId), action: 'balance:create', record, new: fields })
    return presentBalance(balance, new Date())
  })
}

/** Back into use only after an external check has passed and while the calibration lasts (requirements C11, C14). */
async function requireFitForUse(answer: BalanceAnswer): Promise<void> {
  if (answer.isCalibrationOverdue) {
    throw new ConflictError('calibration-overdue', `The calibration of balance ${answer.code} ran out on ${answer.calibrationDueOn}.`)
  }
  const failed = await failedGroup(answer.id)
  const accuracy = await lastCheckOf(answer.id, 'accuracy')
  if (accuracy && failed === undefined) return
  const why = failed === undefined ? 'it was never checked against a weight' : `its last check of ${failed} failed`
  throw new ConflictError('no-passed-check', `Balance ${answer.code} cannot be used: ${why}. Record a passed one first.`)
}

/** Changes a balance, takes it out of use or brings it back. */
export async function updateBalance(actor: Actor, id: string, { version, reason, ...fields }: UpdateBalance): Promise<BalanceAnswer> {
  return inTransaction(async () => {
    const balance = await findMaster(Balance, actor, { permission: 'balance:write', kind: 'balance', id, isLocked: true })
    requireVersion('balance', balance, version)
    const { siteId } = balance
    requireFreeCode('balance', await Balance.findOne({ where: { siteId, code: fields.code } }), { code: fields.code, ownId: id })
    const now = new Date()
    const old = await presentBalance(balance, now)
    await balance.update({ ...fields, version: version + 1 })
    const answer = await presentBalance(balance, now)
    if (old.state === 'out-of-use' && answer.state === 'in-use') await requireFitForUse(answer)
    const record = { kind: 'balance', id }
    await appendAudit({ actor, chain: chainOf.balances(siteId), action: 'balance:update', record, old, new: answer, reason })
    return answer
  })
}
