import type { ChosenTest } from '../run-tests/find-signals.ts'

/**
 * Where a plotted point lies, as far as the zone tests care: from −4 (below the lower limit) over ±1 (within 1 sigma of the
 * centre) to 4 (above the upper limit). There is no zone 0: a continuous value never falls exactly on the centre line.
 */
export type Zone = number
export const ZONES: readonly Zone[] = [-4, -3, -2, -1, 1, 2, 3, 4]

/** The run tests that a zone decides; tests 3 and 4 compare neighbours and need the values themselves. */
export const ZONE_TESTS: readonly number[] = [1, 2, 5, 6, 7, 8]

/** What a test has to remember between two points: a whole number, 0 before the first. */
type Memory = number
/** The memory after the next point, or undefined where the test signals. */
type Step = (memory: Memory, zone: Zone) => Memory | undefined

const isBeyondLimits: Step = (_memory, zone) => (Math.abs(zone) === 4 ? undefined : 0)

/** A run on one side: its length, counted downwards below the centre line. */
function sameSide(length: number): Step {
  return (run, zone) => {
    const next = zone > 0 ? Math.max(run, 0) + 1 : Math.min(run, 0) - 1
    return Math.abs(next) >= length ? undefined : next
  }
}

/** "`needed` of `needed` + 1 beyond": the last `needed` points, two bits each (above, below), the newest lowest. */
function mostBeyond(level: number, needed: number): Step {
  const window = 4 ** needed
  return (memory, zone) => {
    const side = Math.abs(zone) <= level ? 0 : zone > 0 ? 1 : 2
    if (side !== 0 && 1 + countOf(side, memory, needed) >= needed) return undefined
    return (memory * 4 + side) % window
  }
}

function countOf(side: number, memory: number, needed: number): number {
  let count = 0
  for (let place = 0, left = memory; place < needed; place++, left = Math.floor(left / 4)) if (left % 4 === side) count++
  return count
}

function nearCentre(length: number): Step {
  return (run, zone) => {
    const next = Math.abs(zone) === 1 ? run + 1 : 0
    return next >= length ? undefined : next
  }
}

/** Points in a row beyond 1 sigma, and how many of the newest lie on one side; both stop counting at `length`. */
function noneNearCentre(length: number): Step {
  const size = length + 1
  return (memory, zone) => {
    if (Math.abs(zone) === 1) return 0
    const run = Math.min(Math.floor(memory / (2 * size)) + 1, length)
    const wasAbove = memory % 2 === 1
    const sideRun = memory === 0 || wasAbove !== zone > 0 ? 1 : Math.min((Math.floor(memory / 2) % size) + 1, length)
    if (run >= length && sideRun < length) return undefined
    return (run * size + sideRun) * 2 + (zone > 0 ? 1 : 0)
  }
}

function stepOf({ test: { number }, length }: ChosenTest): Step {
  switch (number) {
    case 2:
      return sameSide(length)
    case 5:
      return mostBeyond(2, length)
    case 6:
      return mostBeyond(1, length)
    case 7:
      return nearCentre(length)
    case 8:
      return noneNearCentre(length)
    default:
      return isBeyondLimits
  }
}

/** All chosen zone tests at once, a state being what each of them remembers. */
export interface ZoneAutomaton {
  states: number
  /** The state after `state` and the zone `ZONES[z]` stands at `state · 8 + z`; −1 is a signal. */
  next: Int32Array
  /** How many points the longest memory reaches back. */
  reach: number
}

/**
 * Builds the states that can be reached without a signal; undefined where there are more than `maxStates`.
 * @param chosen tests of {@link ZONE_TESTS}, with their lengths
 * @param maxStates where to give up
 * @see C. W. Champ, W. H. Woodall, Technometrics 29 (1987) 393–399, for the run tests as a Markov chain (cited from memory)
 */
export function buildZoneAutomaton(chosen: readonly ChosenTest[], maxStates: number): ZoneAutomaton | undefined {
  const steps = chosen.map(stepOf)
  const known = new Map<string, number>()
  const memories: Memory[][] = []
  const next: number[] = []
  const stateOf = (memory: Memory[]): number => {
    const key = memory.join()
    const found = known.get(key)
    if (found !== undefined) return found
    known.set(key, memories.length)
    return memories.push(memory) - 1
  }
  stateOf(steps.map(() => 0))
  for (let state = 0; state < memories.length; state++) {
    if (memories.length > maxStates) return undefined
    for (const zone of ZONES) {
      const after = advance(steps, memories[state]!, zone)
      next.push(after ? stateOf(after) : -1)
    }
  }
  return { states: memories.length, next: Int32Array.from(next), reach: Math.max(1, ...chosen.map(({ length }) => length + 1)) }
}

function advance(steps: readonly Step[], memory: readonly Memory[], zone: Zone): Memory[] | undefined {
  const after: Memory[] = []
  for (let place = 0; place < steps.length; place++) {
    const remembered = steps[place]!(memory[place]!, zone)
    if (remembered === undefined) return undefined
    after.push(remembered)
  }
  return after
}
