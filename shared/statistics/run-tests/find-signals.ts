import type { Stretch } from '../baseline.ts'
import { PANEL_NAMES, type PanelName, type Panels } from '../charts/chart-kind.ts'
import { ASSUMPTIONS, type Panel } from '../charts/panel.ts'
import { requireWhole, StatisticsError } from '../errors.ts'
import { RUN_TEST_NUMBERS, RUN_TESTS } from './index.ts'
import type { RunTest } from './run-test.ts'

/** A point at which a run test raises its hand. Points count from 0. */
export interface Signal {
  /** The point that completes the pattern. */
  point: number
  test: number
  panel: PanelName
  /** The points that make up the pattern, `point` the last of them. */
  points: number[]
  /** A plain name, such as "six climbing". */
  name: string
  /** Why, in one plain sentence. */
  sentence: string
}

/** A run test with the number of points that it is to ask for. */
export interface ChosenTest {
  test: RunTest
  length: number
}

/**
 * Looks up the tests that a request names, each with its usual length unless the request sets another.
 * @param tests numbers of {@link RUN_TESTS}
 * @param lengths other lengths; one for a test that is not asked for changes nothing
 * @throws {StatisticsError} `unknown-option`, `not-whole`, `out-of-range`
 */
export function chooseTests(tests: readonly number[], lengths: readonly { test: number; length: number }[] = []): ChosenTest[] {
  const lengthOf = new Map(lengths.map(({ test, length }) => [testNumbered(test, 'testLengths'), length]))
  const chosen = new Set(tests.map((number) => testNumbered(number, 'tests')))
  return RUN_TESTS.filter((test) => chosen.has(test)).map((test) => {
    const length = lengthOf.get(test) ?? test.length.usual
    requireWhole('testLengths', length, test.length)
    return { test, length }
  })
}

/**
 * The chosen tests that mean something on a panel: zone tests need normal points, order tests independent ones.
 * @param panel of a chart
 * @param chosen tests that were asked for
 */
export function testsFor(panel: Panel, chosen: readonly ChosenTest[]): ChosenTest[] {
  const granted = ASSUMPTIONS.indexOf(panel.grants)
  return chosen.filter(({ test }) => ASSUMPTIONS.indexOf(test.needs) <= granted)
}

/**
 * Runs the tests over every panel of a chart, phase by phase, so that no pattern reaches across the border of a phase.
 * @param panels drawn, with their limits
 * @param stretches the phases
 * @param chosen tests; each is run on the panels that it is valid for
 * @returns signals in the order of their points
 */
export function findSignals(panels: Panels, stretches: readonly Stretch[], chosen: readonly ChosenTest[]): Signal[] {
  const signals: Signal[] = []
  for (const name of PANEL_NAMES) {
    const panel = panels[name]
    if (!panel) continue
    for (const { test, length } of testsFor(panel, chosen)) {
      for (const stretch of stretches) collect(signals, name, panel, stretch, test, length)
    }
  }
  return signals.sort((first, second) => first.point - second.point)
}

function collect(signals: Signal[], name: PanelName, panel: Panel, stretch: Stretch, test: RunTest, length: number): void {
  for (const hit of test.detect(panel, stretch, length)) {
    const { point, points } = hit
    signals.push({
      point,
      test: test.number,
      panel: name,
      points,
      name: test.name(hit, length),
      sentence: test.sentence(hit, panel, length),
    })
  }
}

function testNumbered(number: number, argument: string): RunTest {
  const test = RUN_TESTS.find((each) => each.number === number)
  if (test) return test
  throw new StatisticsError(
    'unknown-option',
    argument,
    `${argument} names test ${number}, but the tests are ${RUN_TEST_NUMBERS.join(', ')}.`,
  )
}
