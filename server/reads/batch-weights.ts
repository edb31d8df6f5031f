import { QueryTypes } from 'sequelize'
import { database } from '../database/database.ts'

interface Row {
  sampleId: string
  position: number | null
  valueMg: number
}

/** The weights of a batch's complete samples as they stand now, on the basis they are judged by, in order. */
const WEIGHTS = `
  SELECT w.sample_id AS sampleId, COALESCE(c.position, w.position) AS position,
    IF(s.basis = 'gross', COALESCE(c.gross_mg, w.gross_mg), COALESCE(c.net_mg, w.net_mg)) AS valueMg
  FROM samples s
  JOIN weighings w ON w.sample_id = s.id
  LEFT JOIN weighing_corrections c ON s.correction_count > 0 AND c.sample_id = w.sample_id AND c.ordinal = w.ordinal
    AND c.version = (SELECT MAX(d.version) FROM weighing_corrections d WHERE d.sample_id = w.sample_id AND d.ordinal = w.ordinal)
  WHERE s.batch_id = :batchId AND s.state = 'complete' AND s.excluded_reason IS NULL AND s.kind <> 'start-up'
  ORDER BY s.started_at, s.sequence, w.ordinal`

export interface SampleWeights {
  sampleId: string
  valuesMg: number[]
  positions: (number | null)[]
}

/** Every weight of a batch, sample by sample; start-up and excluded samples are left out. */
export async function batchWeights(batchId: string): Promise<SampleWeights[]> {
  const rows = await database().query<Row>(WEIGHTS, { replacements: { batchId }, type: QueryTypes.SELECT })
  const samples: SampleWeights[] = []
  for (const { sampleId, position, valueMg } of rows) {
    if (samples.at(-1)?.sampleId !== sampleId) samples.push({ sampleId, valuesMg: [], positions: [] })
    samples.at(-1)?.valuesMg.push(valueMg)
    samples.at(-1)?.positions.push(position)
  }
  return samples
}
