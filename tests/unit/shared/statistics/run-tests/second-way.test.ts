import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { controlChart } from '#shared/statistics/control-chart.ts'
import { RUN_TESTS } from '#shared/statistics/run-tests/index.ts'

// Every run test once more by its definition: cut out the window that ends at a point and look at all of it.

type Window = number[]
interface Definition {
  /** Points to look at; near the start of a phase there may be fewer for the tests that allow it. */
  size: (length: number) => number
  isShort: boolean
  holds: (window: Window, length: number) => boolean
}

const isLastAnd = (window: Window, beyond: (z: number) => boolean, needed: number): boolean =>
  beyond(window.at(-1)!) && window.filter(beyond).length >= needed
const stepsOf = (window: Window): number[] => window.slice(1).map((z, i) => Math.sign(z - window[i]!))
const whole = { size: (length: number) => length, isShort: false }
const withOneMore = { size: (length: number) => length + 1, isShort: true }

const DEFINITIONS: Record<number, Definition> = {
  1: { ...whole, holds: ([z = 0]) => Math.abs(z) > 3 },
  2: { ...whole, holds: (window) => window.every((z) => z > 0) || window.every((z) => z < 0) },
  3: { ...whole, holds: (window) => [1, -1].some((way) => stepsOf(window).every((step) => step === way)) },
  4: { ...whole, holds: (window) => stepsOf(window).every((step, i, all) => step !== 0 && (i === 0 || step === -all[i - 1]!)) },
  5: { ...withOneMore, holds: (window, needed) => isLastAnd(window, (z) => z > 2, needed) || isLastAnd(window, (z) => z < -2, needed) },
  6: { ...withOneMore, holds: (window, needed) => isLastAnd(window, (z) => z > 1, needed) || isLastAnd(window, (z) => z < -1, needed) },
  7: { ...whole, holds: (window) => window.every((z) => Math.abs(z) <= 1) },
  8: {
    ...whole,
    holds: (window) => window.every((z) => Math.abs(z) > 1) && window.some((z) => z > 0) && window.some((z) => z < 0),
  },
}

function pointsByDefinition(zs: number[], number: number, length: number): number[] {
  const { size, isShort, holds } = DEFINITIONS[number]!
  return zs.flatMap((_, point) => {
    const from = point + 1 - size(length)
    if (from < 0 && !isShort) return []
    return holds(zs.slice(Math.max(0, from), point + 1), length) ? [point] : []
  })
}

/** Quarter sigmas, so that ties and points on lines are common; patterns of every test are mixed in. */
const zigzag = fc.integer({ min: 4, max: 20 }).map((n) => Array.from({ length: n }, (_, i) => (i % 2 === 0 ? 1.25 : -1.5)))
const climb = fc.integer({ min: 4, max: 9 }).map((n) => Array.from({ length: n }, (_, i) => i / 4))
const quiet = fc.array(
  fc.integer({ min: -4, max: 4 }).map((quarters) => quarters / 4),
  { minLength: 5, maxLength: 20 },
)
const loud = fc.array(
  fc.integer({ min: -14, max: 14 }).map((quarters) => quarters / 4),
  { minLength: 5, maxLength: 20 },
)
const high = fc.array(
  fc.integer({ min: 0, max: 9 }).map((quarters) => quarters / 4),
  { minLength: 5, maxLength: 14 },
)
const sequence = fc.array(fc.oneof(zigzag, climb, quiet, loud, high), { minLength: 1, maxLength: 6 }).map((parts) => parts.flat())

// Sigma 4 and centre 352 make every quarter sigma a whole number, so lines are met exactly.
const signalsOf = (zs: number[], number: number, length: number, phases: number[] = []) =>
  controlChart({
    chart: 'individuals',
    subgroups: zs.map((z) => [352 + 4 * z]),
    target: 352,
    sigma: 4,
    tests: [number],
    testLengths: [{ test: number, length }],
    phases: phases.map((from) => ({ from, label: 'next' })),
  }).signals.filter(({ panel }) => panel === 'location')

describe.each(RUN_TESTS.map((runTest) => [runTest.title, runTest] as const))('%s', (_title, { number, length }) => {
  const lengths = fc.oneof(fc.constant(length.usual), fc.integer({ min: length.min, max: Math.min(length.max, 12) }))

  test('signals exactly where the definition says, for every length', () => {
    let found = 0
    fc.assert(
      fc.property(sequence, lengths, (zs, points) => {
        const signals = signalsOf(zs, number, points)
        found += signals.length
        expect(signals.map(({ point }) => point)).toEqual(pointsByDefinition(zs, number, points))
      }),
      { numRuns: 300 },
    )
    expect(found).toBeGreaterThan(20)
  })

  test('never reaches across the border of a phase', () => {
    fc.assert(
      fc.property(sequence, lengths, fc.nat(), (zs, points, place) => {
        fc.pre(zs.length >= 4)
        const border = 2 + (place % (zs.length - 3))
        const apart = [...pointsByDefinition(zs.slice(0, border), number, points)]
        for (const point of pointsByDefinition(zs.slice(border), number, points)) apart.push(point + border)
        expect(signalsOf(zs, number, points, [border]).map(({ point }) => point)).toEqual(apart)
      }),
    )
  })

  test('names the points that make it up, in order and up to the signal, and says why in one sentence', () => {
    fc.assert(
      fc.property(sequence, lengths, (zs, size) => {
        for (const { point, points, name, sentence } of signalsOf(zs, number, size)) {
          expect(points.at(-1)).toBe(point)
          expect(points).toEqual(points.toSorted((a, b) => a - b))
          expect(points.length).toBeGreaterThanOrEqual(size)
          expect(name).toMatch(/^[a-z0-9 ,]+$/)
          expect(sentence).toMatch(/^[A-Z][^.]*(\d\.\d[^.]*)*\.$/)
          expect(`${name} ${sentence}`).not.toMatch(/undefined|NaN|test/)
        }
      }),
    )
  })

  test('is mirrored by turning the chart upside down', () => {
    fc.assert(
      fc.property(sequence, (zs) => {
        const mirrored = signalsOf(
          zs.map((z) => -z),
          number,
          length.usual,
        )
        expect(mirrored.map(({ point, points }) => [point, points])).toEqual(
          signalsOf(zs, number, length.usual).map(({ point, points }) => [point, points]),
        )
      }),
    )
  })
})
