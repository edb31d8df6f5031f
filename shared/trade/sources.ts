/** Where a figure of the trade comes from. Suppliers stay unnamed; a figure from memory says so. */
export const TRADE_SOURCES = {
  'chart-a': 'Size chart of a capsule supplier (A): volume, gelatin shell weight with tolerance, closed length',
  'chart-b': 'Size chart of a second supplier (B): volume and shell weight',
  'chart-c': 'Specification of a third supplier (C): mean shell weight of 20 with a tolerance of 5 %',
  'capsule-table': 'Capsule volume table of a pharmacy teaching laboratory (University of North Carolina)',
  'study-note': "Study note that transcribes another supplier's table",
  'tablets-capsules-tamping': 'Carlisle, “Tamping: Fine-Tuning Capsule Filling”, Tablets & Capsules',
  'tablets-capsules-2017': 'Tablets & Capsules, January 2017, p. 10 ff (root causes of weight variation, tamping fillers)',
  'instrumentation-2008': 'Ridgway Watt & Armstrong (eds), Tablet and Capsule Machine Instrumentation, 2008, ch. 10',
  'bench-filler': 'Abstract of PMC2750482 (bench tamp filler)',
  'flow-scale': 'Flow scale of USP <1174> as reproduced on public teaching pages',
  'filling-defects-2021': 'Tablets & Capsules, January/February 2021, p. 10 ff (filling defects)',
  derived: 'Derived here from geometry; the derivation stands beside the figure',
  'common-practice': 'Common practice of the trade; no published source found',
  'from-memory': 'Recalled, not checked against print',
} as const

export type TradeSource = keyof typeof TRADE_SOURCES
