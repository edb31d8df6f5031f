import type { ToolingPartAnswer } from '#shared/schemas/tooling-sets.ts'
import type { ToolingPartKind } from '#shared/vocabulary.ts'

/** A part while it is typed; without an identifier it is a new one. */
export interface PartDraft {
  id?: string
  kind: ToolingPartKind
  serial: string
  station: number | null
  inspectionInterval: number | null
  capsulesAtFitting: number | undefined
}

export function partDraft({ id, kind, serial, station, inspectionInterval, capsulesAtFitting }: ToolingPartAnswer): PartDraft {
  return { id, kind, serial, station, inspectionInterval, capsulesAtFitting }
}

export function newPart(): PartDraft {
  return { kind: 'tamping-pins', serial: '', station: null, inspectionInterval: null, capsulesAtFitting: 0 }
}
