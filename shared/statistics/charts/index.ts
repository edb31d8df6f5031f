import { betweenWithin } from './between-within.ts'
import type { ChartKind } from './chart-kind.ts'
import { cusum } from './cusum.ts'
import { ewma } from './ewma.ts'
import { individuals } from './individuals.ts'
import { xbarR } from './xbar-r.ts'
import { xbarS } from './xbar-s.ts'

const LISTED = [xbarR, xbarS, individuals, ewma, cusum, betweenWithin] as const

export type ChartId = (typeof LISTED)[number]['id']

/** Every control chart, in the order of menus. */
export const CHARTS: readonly ChartKind<ChartId>[] = LISTED

/** The names that a request may use. */
export const CHART_IDS: readonly ChartId[] = LISTED.map(({ id }) => id)
