import { beyondLimits } from './1-beyond-limits.ts'
import { oneSide } from './2-one-side.ts'
import { climbingOrFalling } from './3-climbing-or-falling.ts'
import { alternating } from './4-alternating.ts'
import { twoOfThree } from './5-two-of-three.ts'
import { fourOfFive } from './6-four-of-five.ts'
import { nearCentre } from './7-near-centre.ts'
import { noneNearCentre } from './8-none-near-centre.ts'
import type { RunTest } from './run-test.ts'

/** Every run test, in the order of menus. */
export const RUN_TESTS: readonly RunTest[] = [
  beyondLimits,
  oneSide,
  climbingOrFalling,
  alternating,
  twoOfThree,
  fourOfFive,
  nearCentre,
  noneNearCentre,
]

/** The numbers that a request may use. */
export const RUN_TEST_NUMBERS: readonly number[] = RUN_TESTS.map(({ number }) => number)
