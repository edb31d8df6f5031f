import type { Stretch } from '../baseline.ts'
import type { Assumption, Panel } from '../charts/panel.ts'

export type Side = 'above' | 'below'

/** A pattern that was found: where it was complete, the points that make it up, and its side where it has one. */
export interface Hit {
  point: number
  points: number[]
  side?: Side
}

/** One run test. `index.ts` lists them all; menus, schemas and contract tests read that list. */
export interface RunTest {
  /** The number by which a request asks for it; on screen it goes by its name. */
  number: number
  title: string
  /** What the points of a panel must be for the test to mean anything. */
  needs: Assumption
  /** How many points make the pattern. */
  length: { usual: number; min: number; max: number }
  /**
   * Every point of a stretch that completes the pattern; a point that still completes one is found again.
   * Nothing before the stretch counts, so a pattern never reaches across the border of a phase.
   */
  detect: (panel: Panel, stretch: Stretch, length: number) => Hit[]
  /** A plain name for the pennant on the point. */
  name: (hit: Hit, length: number) => string
  /** Why, in one plain sentence. */
  sentence: (hit: Hit, panel: Panel, length: number) => string
}

/** The `length` points that end at `point`. */
export function pointsUpTo(point: number, length: number): number[] {
  const points: number[] = []
  for (let each = point - length + 1; each <= point; each++) points.push(each)
  return points
}
