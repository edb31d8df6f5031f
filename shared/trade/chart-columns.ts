import type { SubgroupColumns } from '../statistics/subgroups.ts'
import type { ChartKind } from '../vocabulary.ts'

/** What a stored sample carries for charts, in mg. */
export interface ChartSample {
  n: number
  meanMg: number | null
  sdMg: number | null
  rangeMg: number | null
  minMg: number | null
  maxMg: number | null
}

/**
 * Stored samples as the columns of a control chart. An individuals chart takes each sample's mean as one value, so that
 * its limits show what varies between samples.
 */
export function chartColumns(samples: readonly ChartSample[], chart: ChartKind): SubgroupColumns {
  const column = (figure: (sample: ChartSample) => number | null): Float64Array =>
    Float64Array.from(samples, (sample) => figure(sample) ?? NaN)
  const mean = column(({ meanMg }) => meanMg)
  if (chart === 'individuals') {
    const zeros = new Float64Array(samples.length)
    return {
      n: new Float64Array(samples.length).fill(1),
      mean,
      sd: new Float64Array(samples.length).fill(NaN),
      range: zeros,
      min: mean,
      max: mean,
    }
  }
  return {
    n: column(({ n }) => n),
    mean,
    sd: column(({ sdMg }) => sdMg),
    range: column(({ rangeMg }) => rangeMg),
    min: column(({ minMg }) => minMg),
    max: column(({ maxMg }) => maxMg),
  }
}
