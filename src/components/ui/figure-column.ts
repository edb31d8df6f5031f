import type { RouteLocationRaw } from 'vue-router'
import type { CsvCell } from '@/export/csv.ts'

/** A column of a FigureTable: `text` is what a person reads, `raw` what the CSV holds, `link` makes the cell lead somewhere. */
export interface FigureColumn<R> {
  key: string
  header: string
  unit?: string
  isFigure?: boolean
  text: (row: R) => string
  raw?: (row: R) => CsvCell
  link?: (row: R) => RouteLocationRaw | undefined
}
