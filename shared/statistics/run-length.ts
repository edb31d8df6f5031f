import { requireFinite, requirePositive, requireWhole, StatisticsError } from './errors.ts'
import type { ChartId } from './charts/index.ts'
import { cusumRunLength, sidesCombineExactly, type CusumSettings } from './run-length/cusum-run-length.ts'
import { ewmaRunLength, silentEwmaRuns, type EwmaSettings } from './run-length/ewma-run-length.ts'
import { cusumWatcher, pointWatcher, simulateChanceOfSignal, simulateRunLength, type Watcher } from './run-length/simulated-runs.ts'
import { averageFromSilence, chanceOfSignal, neverSignals, type Exposure, type SilentRuns } from './run-length/survival.ts'
import { buildZoneAutomaton, ZONE_TESTS, type ZoneAutomaton } from './run-length/zone-automaton.ts'
import { silentZoneRuns } from './run-length/zone-run-length.ts'
import { chooseTests, type ChosenTest } from './run-tests/find-signals.ts'

/** A chart, what it watches with, and the change that it is to see. Shifts and drifts are in sigmas of one unit weighed. */
export interface RunLengthRequest {
  chart: ChartId
  /** Units a sample. */
  n: number
  /** There from the first point on. */
  shiftSigma: number
  /** Added at each point, the first included. */
  driftSigma?: number | undefined
  /** Numbers of run tests; test 1 unless stated. EWMA and CUSUM charts are judged by their limits alone. */
  tests?: readonly number[] | undefined
  /** Other lengths of tests; `sameSideRun` is short for that of test 2. */
  testLengths?: readonly { test: number; length: number }[] | undefined
  sameSideRun?: number | undefined
  ewma?: EwmaSettings | undefined
  cusum?: CusumSettings | undefined
  /** SD between samples, in sigmas of one unit weighed. */
  betweenSigma?: number | undefined
  seed?: number | undefined
}

export interface RunLengthAnswer {
  /** Points until the first signal, the signalling one included. */
  averageRunLength: number
  /** Of a simulated figure; exact ones have none. */
  standardError?: number
  method: 'exact' | 'simulated'
}

/** A chart with more states than this is simulated: the exact way would take seconds. */
const MAX_STATES = 6_000
const USUAL_EWMA: EwmaSettings = { lambda: 0.2, width: 3 }
const USUAL_CUSUM: CusumSettings = { k: 0.5, h: 5, headStart: 0 }
const DEFAULT_SEED = 20_260

/**
 * The average run length of a location chart whose centre and sigma are known, for a step that is there from the first
 * point, or for a drift.
 *
 * Model    a point is normal with mean √n·(shift + t·drift) and, with samples that differ by themselves, SD √(1 + n·r²),
 *          r = `betweenSigma`, in sigmas of limits that know the spread within samples alone. The limits of `individuals` and
 *          `between-within` charts come from moving ranges and so know both: their points have SD 1 and a shift of
 *          (shift + t·drift)/√(1/n + r²).
 * Method   zone tests (1, 2, 5–8): Markov chain, exact. EWMA (constant limits): integral equation, exact to 8 digits or more.
 *          CUSUM under a step: integral equation. Tests 3 and 4, CUSUM under a drift or with a large head start, and chains
 *          of more than 6,000 states: seeded simulation with a standard error.
 * @throws {StatisticsError} `not-whole`, `out-of-range`, `not-finite`, `not-positive`, `unknown-option`; `no-convergence` where the
 *         chart would practically never signal
 * @see the functions used; 79 cases in fixtures/reference/run-length.json; docs/calculations/run-length.md
 */
export function averageRunLength(request: RunLengthRequest): RunLengthAnswer {
  const plan = readPlan(request)
  const { exposure } = plan
  if (plan.kind === 'ewma' && exposure.isSteady) {
    return solved(ewmaRunLength(plan.ewma, exposure.shiftAt(1), exposure.sd))
  }
  if (plan.kind === 'cusum' && exposure.isSteady && sidesCombineExactly(plan.cusum)) {
    return solved(cusumRunLength(plan.cusum, exposure.shiftAt(1), exposure.sd))
  }
  const silent = silentRunsOf(plan)
  if (silent) return { averageRunLength: averageFromSilence(silent, exposure.isSteady), method: 'exact' }
  return { ...simulateRunLength(watcherOf(plan), exposure, plan.seed), method: 'simulated' }
}

/** An integral equation is trusted up to here: beyond, its system is too nearly singular for eight digits. */
const LONGEST_SOLVED = 1e8

function solved(averageRunLength: number): RunLengthAnswer {
  if (!(averageRunLength > 0 && averageRunLength < LONGEST_SOLVED)) throw neverSignals()
  // A shift far beyond the limits is seen at once; rounding may leave the sum a hair below one point.
  return { averageRunLength: Math.max(1, averageRunLength), method: 'exact' }
}

/**
 * The chance that the chart has signalled within the first 1, 2, … `points` points: the power of a plan.
 * @param points a whole number from 1 to 1000
 * @returns one chance a point, rising
 * @throws {StatisticsError} as {@link averageRunLength}
 */
export function chanceSeenWithin(request: RunLengthRequest, points: number): number[] {
  requireWhole('points', points, { min: 1, max: 1000 })
  const plan = readPlan(request)
  const silent = silentRunsOf(plan)
  return silent ? chanceOfSignal(silent, points) : simulateChanceOfSignal(watcherOf(plan), plan.exposure, points, plan.seed)
}

interface Watched {
  exposure: Exposure
  seed: number
}
type Plan =
  | (Watched & { kind: 'points'; zones: readonly ChosenTest[]; neighbours: readonly ChosenTest[] })
  | (Watched & { kind: 'ewma'; ewma: EwmaSettings })
  | (Watched & { kind: 'cusum'; cusum: CusumSettings })

function readPlan(request: RunLengthRequest): Plan {
  const { chart, ewma = USUAL_EWMA, cusum = USUAL_CUSUM, seed = DEFAULT_SEED, tests = [1] } = request
  requireWhole('seed', seed, { min: 0, max: 4_294_967_295 })
  const watched = { exposure: exposureOf(request), seed }
  if (chart === 'ewma') return { ...watched, kind: 'ewma', ewma: checkedEwma(ewma) }
  if (chart === 'cusum') return { ...watched, kind: 'cusum', cusum: checkedCusum(cusum) }
  if (tests.length === 0) throw new StatisticsError('too-few-values', 'tests', 'tests needs at least one test.')
  const chosen = chooseTests(tests, lengthsOf(request))
  const isZoneTest = ({ test }: ChosenTest) => ZONE_TESTS.includes(test.number)
  return { ...watched, kind: 'points', zones: chosen.filter(isZoneTest), neighbours: chosen.filter((each) => !isZoneTest(each)) }
}

function lengthsOf({ testLengths = [], sameSideRun }: RunLengthRequest): { test: number; length: number }[] {
  return sameSideRun === undefined ? [...testLengths] : [...testLengths, { test: 2, length: sameSideRun }]
}

function exposureOf({ chart, n, shiftSigma, driftSigma = 0, betweenSigma = 0 }: RunLengthRequest): Exposure {
  requireWhole('n', n, { min: 1, max: chart === 'individuals' ? 1 : 1000 })
  requireFinite('shiftSigma', shiftSigma)
  requireFinite('driftSigma', driftSigma)
  requireFinite('betweenSigma', betweenSigma)
  if (betweenSigma < 0) throw new StatisticsError('out-of-range', 'betweenSigma', 'betweenSigma cannot be negative.')
  const sdOfMean = Math.sqrt(1 / n + betweenSigma * betweenSigma)
  const knowsBoth = chart === 'individuals' || chart === 'between-within'
  const unit = knowsBoth ? sdOfMean : 1 / Math.sqrt(n)
  return { shiftAt: (t) => (shiftSigma + t * driftSigma) / unit, isSteady: driftSigma === 0, sd: sdOfMean / unit }
}

function checkedEwma({ lambda, width }: EwmaSettings): EwmaSettings {
  requirePositive('ewma.width', width)
  requirePositive('ewma.lambda', lambda)
  if (lambda < 0.01 || lambda > 1) throw new StatisticsError('out-of-range', 'ewma.lambda', 'ewma.lambda must lie from 0.01 to 1.')
  if (width > 10) throw new StatisticsError('out-of-range', 'ewma.width', 'ewma.width must be at most 10.')
  return { lambda, width }
}

function checkedCusum({ k, h, headStart }: CusumSettings): CusumSettings {
  requirePositive('cusum.k', k)
  requirePositive('cusum.h', h)
  requireFinite('cusum.headStart', headStart)
  if (h > 50) throw new StatisticsError('out-of-range', 'cusum.h', 'cusum.h must be at most 50.')
  if (headStart < 0 || headStart >= h) {
    throw new StatisticsError('out-of-range', 'cusum.headStart', 'cusum.headStart must be at least 0 and below cusum.h.')
  }
  return { k, h, headStart }
}

function silentRunsOf(plan: Plan): SilentRuns | undefined {
  if (plan.kind === 'ewma') return silentEwmaRuns(plan.ewma, plan.exposure)
  if (plan.kind === 'cusum' || plan.neighbours.length > 0) return undefined
  const automaton = buildZoneAutomaton(plan.zones, MAX_STATES)
  return automaton && silentZoneRuns(automaton, plan.exposure)
}

function watcherOf(plan: Plan): Watcher {
  if (plan.kind === 'cusum') return cusumWatcher(plan.cusum)
  if (plan.kind === 'ewma') throw new StatisticsError('not-supported', 'chart', 'EWMA charts are never simulated.')
  return pointWatcher(zonesForWatching(plan.zones), plan.neighbours)
}

function zonesForWatching(zones: readonly ChosenTest[]): ZoneAutomaton {
  const automaton = buildZoneAutomaton(zones, 200_000)
  if (automaton) return automaton
  throw new StatisticsError('not-supported', 'testLengths', 'These tests, at these lengths, have too many states together.')
}
