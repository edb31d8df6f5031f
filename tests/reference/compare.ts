import { readFileSync } from 'node:fs'
import { expect } from 'vitest'

/** One published or independently computed figure, as fixtures/reference/README.md describes it. */
export interface ReferenceCase {
  id: string
  source: string
  sourceKind: string
  endpoint: string | null
  // A body goes straight to the function behind its endpoint, so a test may name the request type it expects.
  body: never
  expected: unknown
  tolerance: Tolerance
  note?: string
}

export type Tolerance = { absolute: number } | { relative: number }

/** Reads one file of fixtures/reference, without its extension. */
export function loadCases<T = ReferenceCase>(file: string): T[] {
  const text = readFileSync(new URL(`../../fixtures/reference/${file}.json`, import.meta.url), 'utf8')
  return JSON.parse(text) as T[]
}

/** Fails with case, field, wanted, got and note unless `got` holds everything that the case expects. */
export function expectCase(got: unknown, referenceCase: Pick<ReferenceCase, 'id' | 'expected' | 'tolerance' | 'note'>): void {
  const { id, expected, tolerance, note } = referenceCase
  const wrong = differences(got, expected, tolerance, '')
  expect(wrong, `${id}: ${note ?? ''}`).toEqual([])
}

/** Every place where `got` does not agree with `want`: empty when it does. */
export function differences(got: unknown, want: unknown, tolerance: Tolerance, field: string): string[] {
  if (want === null) return []
  if (typeof want === 'number') return numberDifferences(got, want, tolerance, field)
  if (Array.isArray(want)) return arrayDifferences(got, want, tolerance, field)
  if (typeof want === 'object') {
    if (typeof got !== 'object' || got === null) return [`${field}: want an object, got ${JSON.stringify(got)}`]
    return Object.entries(want).flatMap(([key, inner]) => {
      const path = field === '' ? key : `${field}.${key}`
      return key in got ? differences(Reflect.get(got, key), inner, tolerance, path) : [`${path}: missing`]
    })
  }
  return got === want ? [] : [`${field}: want ${JSON.stringify(want)}, got ${JSON.stringify(got)}`]
}

function numberDifferences(got: unknown, want: number, tolerance: Tolerance, field: string): string[] {
  // A single expected number stands for every element of an array answer, such as limits that do not change.
  if (isList(got)) return Array.from(got, (each, place) => numberDifferences(each, want, tolerance, `${field}[${place}]`)).flat()
  if (typeof got !== 'number') return [`${field}: want ${want}, got ${JSON.stringify(got)}`]
  const allowed = 'absolute' in tolerance ? tolerance.absolute : tolerance.relative * Math.max(Math.abs(want), 1e-9)
  return Math.abs(got - want) <= allowed ? [] : [`${field}: want ${want} ± ${allowed}, got ${got}`]
}

function arrayDifferences(got: unknown, want: unknown[], tolerance: Tolerance, field: string): string[] {
  if (!isList(got)) return [`${field}: want a list, got ${JSON.stringify(got)}`]
  if (got.length !== want.length) return [`${field}: want ${want.length} elements, got ${got.length}: ${JSON.stringify(Array.from(got))}`]
  if (field === 'signals') return setDifferences(Array.from(got), want, tolerance)
  return want.flatMap((each, place) => differences(got[place], each, tolerance, `${field}[${place}]`))
}

/** Signals have no order of their own: each wanted one must be among those got, and their number is the same. */
function setDifferences(got: unknown[], want: unknown[], tolerance: Tolerance): string[] {
  const left = [...got]
  return want.flatMap((each) => {
    const place = left.findIndex((candidate) => differences(candidate, each, tolerance, 'signal').length === 0)
    if (place < 0) return [`signals: ${JSON.stringify(each)} is missing`]
    left.splice(place, 1)
    return []
  })
}

function isList(value: unknown): value is ArrayLike<unknown> {
  return Array.isArray(value) || ArrayBuffer.isView(value)
}
