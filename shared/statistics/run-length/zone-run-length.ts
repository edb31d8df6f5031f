import { normalCumulative } from '../distributions/normal.ts'
import type { Exposure, SilentRuns } from './survival.ts'
import type { ZoneAutomaton } from './zone-automaton.ts'

const ZONE_BORDERS = [-3, -2, -1, 0, 1, 2, 3]

/** The chance of each zone, lowest first, for a point with this mean and SD in sigmas of the limits. */
export function zoneChances(mean: number, sd: number): number[] {
  const below = ZONE_BORDERS.map((border) => normalCumulative((border - mean) / sd))
  const above = ZONE_BORDERS.map((border) => normalCumulative((mean - border) / sd))
  // The smaller of the two tails is the more exact one, so each zone takes its difference on its own side of the mean.
  const between = below
    .slice(1)
    .map((upper, place) => (ZONE_BORDERS[place]! >= mean ? above[place]! - above[place + 1]! : upper - below[place]!))
  return [below[0]!, ...between, above.at(-1)!]
}

/**
 * A location chart judged by zone tests, as a Markov chain over what the tests remember: exact, whatever the exposure.
 * @see C. W. Champ, W. H. Woodall, Technometrics 29 (1987) 393–399 (cited from memory)
 */
export function silentZoneRuns({ states, next, reach }: ZoneAutomaton, { shiftAt, isSteady, sd }: Exposure): SilentRuns {
  let shares = new Float64Array(states)
  let after = new Float64Array(states)
  shares[0] = 1
  let chances = zoneChances(shiftAt(1), sd)
  const advance = (t: number): number => {
    if (!isSteady) chances = zoneChances(shiftAt(t), sd)
    after.fill(0)
    let silent = 0
    for (let state = 0; state < states; state++) {
      const share = shares[state]!
      if (share === 0) continue
      for (let zone = 0; zone < chances.length; zone++) {
        const target = next[state * chances.length + zone]!
        if (target < 0) continue
        const moved = share * chances[zone]!
        after[target] = after[target]! + moved
        silent += moved
      }
    }
    ;[shares, after] = [after, shares]
    return silent
  }
  return { advance, settlesAfter: 4 * reach }
}
