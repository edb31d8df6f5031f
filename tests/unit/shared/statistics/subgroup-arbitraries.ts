import fc from 'fast-check'

/** Weights as a balance shows them, in tenths of a milligram, so that ties occur. */
export const weight = fc.integer({ min: 3000, max: 4000 }).map((tenths) => tenths / 10)

/** Subgroups of one size. */
export function equalSubgroups({ size, least = 2, most = 40 }: { size: number; least?: number; most?: number }): fc.Arbitrary<number[][]> {
  return fc.array(fc.array(weight, { minLength: size, maxLength: size }), { minLength: least, maxLength: most })
}

/** Subgroups whose sizes differ. */
export const unequalSubgroups = fc.array(fc.array(weight, { minLength: 2, maxLength: 9 }), { minLength: 2, maxLength: 40 })

/** Single values, each a subgroup of its own. */
export const singleValues = fc.array(weight, { minLength: 2, maxLength: 60 }).map((values) => values.map((value) => [value]))

/** Any finite numbers, however far apart: some lists only of such as a chart takes, some with larger ones. */
export const wildSubgroups = fc
  .constantFrom(1e3, 1e150, Number.MAX_VALUE)
  .chain((max) =>
    fc.array(fc.array(fc.double({ min: -max, max, noNaN: true }), { minLength: 1, maxLength: 6 }), { minLength: 1, maxLength: 20 }),
  )
