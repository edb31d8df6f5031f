import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { CAPSULE_SIZES, capsuleSize, expectedFillMg } from '#shared/trade/capsule-sizes.ts'
import { SIGNATURES } from '#shared/trade/signatures.ts'
import { TRADE_SOURCES } from '#shared/trade/sources.ts'
import { carrIndexPercent, flowWord, hausnerRatio, leverById, LEVERS, LEVER_TABLE, weightResponseCeiling } from '#shared/trade/tamping.ts'

describe('capsule sizes', () => {
  test('run from large to small in volume, length and shell weight', () => {
    const volumes = CAPSULE_SIZES.map(({ bodyVolumeMl }) => bodyVolumeMl.from)
    expect(volumes).toEqual(volumes.toSorted((a, b) => b - a))
    const shells = CAPSULE_SIZES.map(({ typicalShells }) => typicalShells[0]!.mg)
    expect(shells).toEqual(shells.toSorted((a, b) => b - a))
  })

  test.each([
    ['0', 0.6, 408, 408],
    ['1', 0.5, 240, 250],
    ['4', 0.5, 100, 105],
    ['00', 0.7, 630, 665],
  ])('size %s at %s g/mL holds %s to %s mg', (size, density, from, to) => {
    const fill = expectedFillMg(capsuleSize(size)!, density)
    expect(fill.from).toBeCloseTo(from, 9)
    expect(fill.to).toBeCloseTo(to, 9)
  })

  test('an unknown size is none, and a density of zero is refused', () => {
    expect(capsuleSize('7')).toBeUndefined()
    expect(() => expectedFillMg(capsuleSize('0')!, 0)).toThrow(expect.objectContaining({ code: 'not-positive' }))
  })

  test('every figure names a source that exists', () => {
    const named = CAPSULE_SIZES.flatMap(({ sources, typicalShells }) => [...sources, ...typicalShells.map(({ source }) => source)])
    for (const source of [...named, ...LEVER_TABLE.map(({ source }) => source)]) expect(TRADE_SOURCES).toHaveProperty(source)
  })
})

describe('tamping', () => {
  test('a 7.0 mm bore at 0.45 g/mL gives at most about 17 mg a millimetre', () => {
    expect(weightResponseCeiling({ boreDiameterMm: 7, bulkDensityGPerMl: 0.45 })).toBeCloseTo(38.4845 * 0.45, 3)
  })

  test('Carr and Hausner say the same thing', () => {
    fc.assert(
      fc.property(fc.double({ min: 0.1, max: 1, noNaN: true }), fc.double({ min: 0, max: 1, noNaN: true }), (bulk, extra) => {
        const tapped = bulk + extra
        expect(carrIndexPercent(bulk, tapped)).toBeCloseTo(100 * (1 - 1 / hausnerRatio(bulk, tapped)), 9)
      }),
    )
  })

  test.each([
    [10, 'excellent'],
    [15, 'good'],
    [16, 'fair'],
    [23, 'passable'],
    [27, 'poor'],
    [37, 'very poor'],
    [38, 'very, very poor'],
  ])('a Carr index of %s is %s', (carr, word) => expect(flowWord(carr)).toBe(word))

  test('refuses densities that cannot be', () => {
    expect(() => carrIndexPercent(0.6, 0.5)).toThrow(expect.objectContaining({ code: 'limits-crossed' }))
    expect(() => hausnerRatio(0, 0.5)).toThrow(expect.objectContaining({ code: 'not-positive' }))
    expect(() => flowWord(-1)).toThrow(expect.objectContaining({ code: 'out-of-range' }))
    expect(() => flowWord(101)).toThrow(expect.objectContaining({ code: 'out-of-range' }))
  })

  test('every lever has an entry, and a coarse move is never below a fine one', () => {
    for (const id of LEVERS) {
      const { maxMove } = leverById(id)
      if (maxMove) expect(maxMove.coarse).toBeGreaterThanOrEqual(maxMove.fine)
    }
  })
})

test('every signature has a cause and a first check, and its own id', () => {
  expect(new Set(SIGNATURES.map(({ id }) => id)).size).toBe(SIGNATURES.length)
  for (const { causes, firstCheck } of SIGNATURES) expect(causes.length * firstCheck.length).toBeGreaterThan(0)
})
