import type { BalanceCheckKind } from '#shared/vocabulary.ts'
import { BalanceCheck } from '../../models/balance-check.ts'

/** What a check proves: that the balance shows the right weight, or that it shows the same weight again. Neither stands for the other. */
export const CHECK_GROUPS = {
  accuracy: ['daily', 'calibration'],
  repeatability: ['repeatability'],
} as const satisfies Record<string, readonly BalanceCheckKind[]>

export type CheckGroup = keyof typeof CHECK_GROUPS

/** The last check of a group, if there was one. */
export function lastCheckOf(balanceId: string, group: CheckGroup): Promise<BalanceCheck | null> {
  return BalanceCheck.findOne({
    where: { balanceId, kind: [...CHECK_GROUPS[group]] },
    order: [
      ['checkedAt', 'DESC'],
      ['id', 'DESC'],
    ],
  })
}

/** The group whose last check failed, accuracy first; undefined while none stands failed. */
export async function failedGroup(balanceId: string): Promise<CheckGroup | undefined> {
  if ((await lastCheckOf(balanceId, 'accuracy'))?.hasPassed === false) return 'accuracy'
  return (await lastCheckOf(balanceId, 'repeatability'))?.hasPassed === false ? 'repeatability' : undefined
}
