/**
 * The fixed words of the record: database, API and screens use these and no second word for the same thing.
 * The wording that a person reads is made from them in the client; here they are keys.
 */
export const WEIGHING_BASES = ['gross', 'net-mean-tare', 'net-individual'] as const
export type WeighingBasis = (typeof WEIGHING_BASES)[number]

export const SAMPLE_KINDS = ['start-up', 'routine', 'after-adjustment', 'after-stop', 'resample', 'end'] as const
export type SampleKind = (typeof SAMPLE_KINDS)[number]

export const SAMPLE_STATES = ['incomplete', 'complete', 'abandoned'] as const
export type SampleState = (typeof SAMPLE_STATES)[number]

export const WEIGHING_ENTRIES = ['typed', 'balance', 'file'] as const
export type WeighingEntry = (typeof WEIGHING_ENTRIES)[number]

export const VERDICTS = ['in-control', 'alert', 'action'] as const
export type Verdict = (typeof VERDICTS)[number]

export const BATCH_STATES = ['planned', 'running', 'ended', 'released', 'on-hold', 'rejected'] as const
export type BatchState = (typeof BATCH_STATES)[number]

export const CHANGEOVER_STATES = ['in-progress', 'done', 'checked'] as const
export type ChangeoverState = (typeof CHANGEOVER_STATES)[number]

export const MACHINE_EVENT_KINDS = [
  'start',
  'stop',
  'speed',
  'refill',
  'adjustment',
  'shell-lot',
  'blend-container',
  'tare',
  'changeover',
] as const
export type MachineEventKind = (typeof MACHINE_EVENT_KINDS)[number]

export const MACHINE_SETTINGS = ['penetration', 'bed-height', 'disc-thickness', 'spring'] as const
export type MachineSetting = (typeof MACHINE_SETTINGS)[number]

export const TOOLING_PART_KINDS = [
  'dosing-disc',
  'tamping-pins',
  'transfer-pins',
  'seal-ring',
  'segments',
  'bushes',
  'springs',
  'scraper',
] as const
export type ToolingPartKind = (typeof TOOLING_PART_KINDS)[number]

export const CONTROL_PLAN_STATES = ['proposed', 'approved', 'superseded', 'withdrawn'] as const
export type ControlPlanState = (typeof CONTROL_PLAN_STATES)[number]

/** The charts that a control plan may prescribe; the calculator knows more. */
export const CHART_KINDS = ['xbar-r', 'xbar-s', 'individuals'] as const
export type ChartKind = (typeof CHART_KINDS)[number]

export const BALANCE_STATES = ['in-use', 'out-of-use'] as const
export type BalanceState = (typeof BALANCE_STATES)[number]

export const BALANCE_CHECK_KINDS = ['daily', 'calibration', 'repeatability'] as const
export type BalanceCheckKind = (typeof BALANCE_CHECK_KINDS)[number]

export const WEIGHING_FILE_STATES = ['uploaded', 'published', 'refused'] as const
export type WeighingFileState = (typeof WEIGHING_FILE_STATES)[number]

export const SIGNAL_SEVERITIES = ['alert', 'action'] as const
export type SignalSeverity = (typeof SIGNAL_SEVERITIES)[number]

export const SIGNAL_STATES = ['active', 'acknowledged', 'returned', 'closed'] as const
export type SignalState = (typeof SIGNAL_STATES)[number]

/** One limit or run test that a sample hit: its key, its plain name, and the points that make it up (sample ids). */
export interface SignalSource {
  test: string
  name: string
  severity: SignalSeverity
  sentence: string
  sampleIds: string[]
}

export const DEVIATION_STATES = ['open', 'closed'] as const
export type DeviationState = (typeof DEVIATION_STATES)[number]

export const DISPOSITION_DECISIONS = ['release', 'hold', 'reject'] as const
export type DispositionDecision = (typeof DISPOSITION_DECISIONS)[number]

export const REVIEW_ACTION_STATES = ['open', 'done', 'dropped'] as const
export type ReviewActionState = (typeof REVIEW_ACTION_STATES)[number]

export const OUTBOX_MAIL_STATES = ['waiting', 'claimed', 'sent', 'failed'] as const
export type OutboxMailState = (typeof OUTBOX_MAIL_STATES)[number]

/** What one capsule is said to contain of one active, and the assay of the batch in percent of that claim. */
export interface LabelClaim {
  active: string
  claimMg: number
}

export const ACCEPTANCE_STANDARDS = ['usp-905-weight', 'usp-2091', 'ph-eur-2.9.5'] as const
export type AcceptanceStandard = (typeof ACCEPTANCE_STANDARDS)[number]
