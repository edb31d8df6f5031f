import { LuDecomposition, Matrix } from 'ml-matrix'
import { normalCumulative } from '../distributions/normal.ts'
import { gaussLegendre } from './gauss-legendre.ts'

export interface CusumSettings {
  /** Reference value, decision value and starting value of both sums, in sigmas of the plotted point. */
  k: number
  h: number
  headStart: number
}

/**
 * Whether the two sides can be combined exactly: with this head start no sum can pass h while the other is still above zero.
 * Both sums above zero lose 2k a point together, so it holds while 2·headStart ≤ h + 2k.
 */
export function sidesCombineExactly({ k, h, headStart }: CusumSettings): boolean {
  return 2 * headStart <= h + 2 * k
}

/**
 * Average run length of a two-sided tabular CUSUM under a steady shift.
 *
 * Formula  each side: L(s) = 1 + L(0)·Φ((k − s − δ)/τ) + ∫₀ʰ L(y)·φ((y − s + k − δ)/τ)/τ dy, on Gauss–Legendre nodes;
 *          both: (L⁺(u)·L⁻(0) + L⁺(0)·L⁻(u) − L⁺(0)·L⁻(0)) / (L⁺(0) + L⁻(0)) with u the head start,
 *          which is 1/L = 1/L⁺ + 1/L⁻ without one.
 * @param settings for which {@link sidesCombineExactly} holds
 * @param shift δ, the mean of a point in sigmas
 * @param sd τ, the SD of a point in the same sigmas
 * @returns points, infinite where neither side practically ever signals
 * @see E. S. Page, Biometrika 41 (1954) 100–115; J. M. Lucas, R. B. Crosier, Technometrics 24 (1982) 199–205 (both cited from memory);
 *      cases in fixtures/reference/run-length.json
 */
export function cusumRunLength(settings: CusumSettings, shift: number, sd: number): number {
  const upper = oneSided(settings, shift, sd)
  const lower = oneSided(settings, -shift, sd)
  if (!lower) return upper?.fromStart ?? Infinity
  if (!upper) return lower.fromStart
  const both = upper.fromStart * lower.fromZero + upper.fromZero * lower.fromStart - upper.fromZero * lower.fromZero
  return both / (upper.fromZero + lower.fromZero)
}

/** A side that is silent for longer than this plays no part beside one that signals, and its system is nearly singular. */
const SILENT_SIDE = 1e12

/** The run lengths of one side, or undefined where it practically never signals. */
function oneSided({ k, h, headStart }: CusumSettings, shift: number, sd: number): { fromZero: number; fromStart: number } | undefined {
  const size = Math.min(400, Math.max(60, Math.ceil((12 * h) / sd)))
  const { nodes, weights } = gaussLegendre(size, { lower: 0, upper: h })
  const kernel = (from: number, to: number) => Math.exp(-0.5 * ((to - from + k - shift) / sd) ** 2) / (sd * Math.sqrt(2 * Math.PI))
  const toZero = (from: number) => normalCumulative((k - from - shift) / sd)
  // Unknowns: the run length from zero first, then from each node.
  const starts = [0, ...nodes]
  const matrix = new Matrix(size + 1, size + 1)
  starts.forEach((from, row) => {
    matrix.set(row, 0, (row === 0 ? 1 : 0) - toZero(from))
    for (let place = 0; place < size; place++) {
      matrix.set(row, place + 1, (row === place + 1 ? 1 : 0) - weights[place]! * kernel(from, nodes[place]!))
    }
  })
  const system = new LuDecomposition(matrix)
  if (system.isSingular()) return undefined
  const lengths = system.solve(Matrix.ones(size + 1, 1))
  const fromZero = lengths.get(0, 0)
  if (!(fromZero >= 1 && fromZero < SILENT_SIDE)) return undefined
  let fromStart = 1 + fromZero * toZero(headStart)
  for (let place = 0; place < size; place++) fromStart += weights[place]! * kernel(headStart, nodes[place]!) * lengths.get(place + 1, 0)
  return { fromZero, fromStart }
}
