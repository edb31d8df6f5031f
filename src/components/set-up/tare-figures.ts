import { summarise } from '#shared/statistics/summary.ts'

/** The trade weighs 50 to 100 shells of a lot. */
const ENOUGH_SHELLS = 50

export interface TareFigures {
  mean: number | undefined
  sd: number | undefined
  standardError: number | undefined
  advice: string
}

/** Mean, SD and standard error while the shells are typed, by the same functions as the server's. */
export function tareFigures(weightsMg: readonly number[]): TareFigures {
  const advice =
    weightsMg.length < ENOUGH_SHELLS ? `${ENOUGH_SHELLS - weightsMg.length} more to the usual ${ENOUGH_SHELLS}` : 'enough for a tare'
  if (weightsMg.length < 2) return { mean: undefined, sd: undefined, standardError: undefined, advice }
  const { n, mean, sd } = summarise(weightsMg)
  return { mean, sd, standardError: sd / Math.sqrt(n), advice }
}
