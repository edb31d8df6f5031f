import type { BalanceAnswer } from '#shared/schemas/balances.ts'

/** Whether a balance may be weighed on, in a word and its shape; the worst reason is said. */
export function balanceState({
  state,
  isCalibrationOverdue,
  lastCheck,
}: Pick<BalanceAnswer, 'state' | 'isCalibrationOverdue' | 'lastCheck'>): {
  state: 'in-control' | 'alert' | 'action'
  word: string
} {
  if (lastCheck?.hasPassed === false) return { state: 'action', word: 'Last check failed' }
  if (isCalibrationOverdue) return { state: 'action', word: 'Calibration overdue' }
  if (lastCheck === null) return { state: 'alert', word: 'Never checked' }
  return state === 'in-use' ? { state: 'in-control', word: 'In use' } : { state: 'alert', word: 'Out of use' }
}
