import type { BatchState, ChangeoverState, MachineEventKind, SampleKind, SignalState, Verdict, WeighingBasis } from '#shared/vocabulary.ts'

/** How a person reads the fixed words of the record. */
export const SAMPLE_KIND_WORDS: Record<SampleKind, string> = {
  'start-up': 'Start-up',
  routine: 'Routine',
  'after-adjustment': 'After adjustment',
  'after-stop': 'After stop',
  resample: 'Resample',
  end: 'End of run',
}

export const BASIS_WORDS: Record<WeighingBasis, string> = {
  gross: 'gross',
  'net-mean-tare': 'net by mean tare',
  'net-individual': 'net by individual shell',
}

export const VERDICT_WORDS: Record<Verdict, string> = { 'in-control': 'In control', alert: 'Alert', action: 'Action' }

export const BATCH_STATE_WORDS: Record<BatchState, string> = {
  planned: 'Planned',
  running: 'Running',
  ended: 'Awaiting release',
  released: 'Released',
  'on-hold': 'On hold',
  rejected: 'Rejected',
}

export const EVENT_WORDS: Record<MachineEventKind, string> = {
  start: 'Start',
  stop: 'Stop',
  speed: 'Speed',
  refill: 'Refill',
  adjustment: 'Adjustment',
  'shell-lot': 'Shell lot',
  'blend-container': 'Blend container',
  tare: 'Tare',
  changeover: 'Tooling change',
}

export const SIGNAL_STATE_WORDS: Record<SignalState, string> = {
  active: 'Not yet acknowledged',
  acknowledged: 'Acknowledged',
  returned: 'Back in control, not acknowledged',
  closed: 'Closed',
}

export const CHANGEOVER_STATE_WORDS: Record<ChangeoverState, string> = {
  'in-progress': 'In progress',
  done: 'Waiting for the check',
  checked: 'Checked',
}
