import { LuDecomposition, Matrix } from 'ml-matrix'
import { gaussLegendre, type Quadrature } from './gauss-legendre.ts'
import type { Exposure, SilentRuns } from './survival.ts'

export interface EwmaSettings {
  /** Weight of the newest point, above 0 and at most 1. */
  lambda: number
  /** Distance of the limits, in sigmas of the weighted mean. */
  width: number
}

/** Four nodes to the SD of a step: a normal kernel is then resolved to the last digit; 400 bound the work. */
function nodesFor(halfWidth: number, kernelSd: number): number {
  return Math.min(400, Math.max(80, Math.ceil((8 * halfWidth) / kernelSd)))
}

function limitOf({ lambda, width }: EwmaSettings): number {
  return width * Math.sqrt(lambda / (2 - lambda))
}

function density(x: number): number {
  return Math.exp(-0.5 * x * x) / Math.sqrt(2 * Math.PI)
}

function gridOf(settings: EwmaSettings, sd: number): { limit: number; grid: Quadrature } {
  const limit = limitOf(settings)
  return { limit, grid: gaussLegendre(nodesFor(limit, settings.lambda * sd), { lower: -limit, upper: limit }) }
}

/**
 * Average run length of a two-sided EWMA chart with constant (asymptotic) limits, started on target.
 *
 * Formula  L(z) = 1 + ∫ L(w)·φ(((w − (1 − λ)z)/λ − δ)/τ)/(λτ) dw over the limits, solved on Gauss–Legendre nodes (Nyström).
 * @param settings λ and L
 * @param shift δ, the mean of a point in sigmas
 * @param sd τ, the SD of a point in the same sigmas
 * @returns points; without meaning above about 1e12, where the system is nearly singular, and infinite where it is so
 * @see S. V. Crowder, Technometrics 29 (1987) 401–407 (cited from memory); cases in fixtures/reference/run-length.json
 */
export function ewmaRunLength(settings: EwmaSettings, shift: number, sd: number): number {
  const { lambda } = settings
  const { grid } = gridOf(settings, sd)
  const kernel = (from: number, to: number) => density(((to - (1 - lambda) * from) / lambda - shift) / sd) / (lambda * sd)
  const { nodes, weights } = grid
  const size = nodes.length
  const matrix = new Matrix(size, size)
  for (let row = 0; row < size; row++) {
    for (let column = 0; column < size; column++) {
      matrix.set(row, column, (row === column ? 1 : 0) - weights[column]! * kernel(nodes[row]!, nodes[column]!))
    }
  }
  const system = new LuDecomposition(matrix)
  if (system.isSingular()) return Infinity
  const lengths = system.solve(Matrix.ones(size, 1))
  let runLength = 1
  for (let place = 0; place < size; place++) runLength += weights[place]! * kernel(0, nodes[place]!) * lengths.get(place, 0)
  return runLength
}

/**
 * The same chart point by point, for a drift and for the chance of a signal within so many points: the density of the
 * weighted mean of the runs that are still silent, carried from node to node.
 */
export function silentEwmaRuns(settings: EwmaSettings, { shiftAt, sd }: Exposure): SilentRuns {
  const { lambda } = settings
  const { nodes, weights } = gridOf(settings, sd).grid
  const scale = 1 / (lambda * sd)
  let densities: Float64Array | undefined
  const advance = (t: number): number => {
    const shift = shiftAt(t)
    const before = densities
    const after = nodes.map((to) => {
      const arriving = (from: number) => density(((to - (1 - lambda) * from) / lambda - shift) / sd) * scale
      if (!before) return arriving(0)
      let sum = 0
      for (let place = 0; place < nodes.length; place++) sum += weights[place]! * before[place]! * arriving(nodes[place]!)
      return sum
    })
    densities = after
    let silent = 0
    for (let place = 0; place < nodes.length; place++) silent += weights[place]! * after[place]!
    return silent
  }
  return { advance, settlesAfter: Math.ceil(5 / lambda) }
}
