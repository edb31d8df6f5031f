import type { BalanceDetail, RecordBalanceCheck } from '#shared/schemas/balances.ts'
import { balanceRepeatability } from '#shared/statistics/balance.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { InvalidFieldError } from '../../errors.ts'
import type { Actor } from '../../http/actor.ts'
import { Balance } from '../../models/balance.ts'
import { BalanceCheck } from '../../models/balance-check.ts'
import { appendAudit, chainOf } from '../audit.ts'
import { statedTime } from '../stated-time.ts'
import { balanceDetail } from './balances.ts'
import { findMaster } from './master-record.ts'
import { failedGroup, lastCheckOf } from './standing-checks.ts'

/** A rounding error of a thousandth of a step is no finer reading. */
const STEP_TOLERANCE = 1e-3
/** Of figures that were typed with four decimals at most. */
const ROUNDING_MG = 1e-9

/** A reading between two steps of the balance was not read from it (requirement C16). */
function requireSteps({ readabilityMg, capacityMg }: Balance, readings: readonly number[], pointerOf: (place: number) => string): void {
  for (const [place, reading] of readings.entries()) {
    const steps = reading / readabilityMg
    if (Math.abs(steps - Math.round(steps)) > STEP_TOLERANCE) {
      throw new InvalidFieldError(
        pointerOf(place),
        `The balance shows steps of ${readabilityMg} mg; ${reading} mg lies between two of them.`,
      )
    }
    if (reading > capacityMg) throw new InvalidFieldError(pointerOf(place), `${reading} mg is above the capacity of ${capacityMg} mg.`)
  }
}

interface Outcome {
  readingMg: number
  hasPassed: boolean
  repeatabilitySdMg?: number
}

function judge(balance: Balance, check: RecordBalanceCheck): Outcome {
  if (check.kind !== 'repeatability') {
    const { readingMg, nominalMg, toleranceMg } = check
    requireSteps(balance, [readingMg], () => '/readingMg')
    return { readingMg, hasPassed: Math.abs(readingMg - nominalMg) <= toleranceMg + ROUNDING_MG }
  }
  requireSteps(balance, check.readingsMg, (place) => `/readingsMg/${place}`)
  const sd = balanceRepeatability(check.readingsMg)
  return { readingMg: sd, hasPassed: sd <= check.toleranceMg + ROUNDING_MG, repeatabilitySdMg: Number(sd.toFixed(4)) }
}

/**
 * Records an external check and what follows from it: a failed one takes the balance out of use at once, with every
 * sample since the last good check in the answer; a passed first check, or a passed check after none, brings a new
 * balance into use. A repeatability check also books the SD that the smallest weight is computed from.
 */
export async function recordBalanceCheck(actor: Actor, balanceId: string, check: RecordBalanceCheck): Promise<BalanceDetail> {
  return inTransaction(async () => {
    const balance = await findMaster(Balance, actor, { permission: 'balance:check', kind: 'balance', id: balanceId, isLocked: true })
    const { readingMg, hasPassed, repeatabilitySdMg } = judge(balance, check)
    const checkedAt = statedTime('/checkedAt', check.checkedAt, new Date())
    const { kind, referenceWeight, nominalMg, toleranceMg, remarks } = check
    const isFirst = kind !== 'repeatability' && (await lastCheckOf(balanceId, 'accuracy')) === null
    const figures = { kind, referenceWeight, nominalMg, readingMg: Number(readingMg.toFixed(4)), toleranceMg, hasPassed, remarks }
    const row = await BalanceCheck.create({ balanceId, checkedAt, checkedById: actor.userId, ...figures })
    const old = { state: balance.state, repeatabilitySdMg: balance.repeatabilitySdMg }
    const isNowFit = hasPassed && isFirst && (await failedGroup(balanceId)) === undefined
    const state = isNowFit ? 'in-use' : hasPassed ? balance.state : 'out-of-use'
    await balance.update({ state, ...(repeatabilitySdMg === undefined ? {} : { repeatabilitySdMg }), version: balance.version + 1 })
    await appendAudit({
      actor,
      chain: chainOf.balances(balance.siteId),
      action: 'balance:check',
      record: { kind: 'balance-check', id: row.id },
      old: { balanceId, ...old },
      new: { balanceId, ...check, ...figures, state, repeatabilitySdMg: balance.repeatabilitySdMg },
    })
    return balanceDetail(balance)
  })
}
