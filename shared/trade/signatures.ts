/** What a chart shows, and what to look at first. */
export interface Signature {
  id: string
  pattern: string
  /** Most likely first. */
  causes: readonly string[]
  firstCheck: string
}

/**
 * What a pattern in the weights usually means on a tamp filler. Common practice and derivation, not proof: each row
 * names a first check, made as the machine's manual and the site's procedures allow.
 */
export const SIGNATURES: readonly Signature[] = [
  {
    id: 'drift-down',
    pattern: 'Slow drift down at all positions',
    causes: ['clearance opening or seal-ring wear', 'bed level falling', 'powder build-up on pin tips or in bores', 'blend segregating'],
    firstCheck: 'Dust under the disc, bed level, clearance, pin faces',
  },
  {
    id: 'drift-up',
    pattern: 'Slow drift up',
    causes: ['powder packing in the bowl', 'humidity', 'build-up raising the bed', 'speed lowered'],
    firstCheck: 'Bed, relative humidity, speed log',
  },
  {
    id: 'step-after-adjustment',
    pattern: 'Step right after an adjustment',
    causes: ['expected', 'a screw slipped or the wrong station was moved, if the step is not change × learned slope'],
    firstCheck: 'Reading on the scale against the log',
  },
  {
    id: 'step-without-adjustment',
    pattern: 'Step with no adjustment',
    causes: [
      'new container or blend lot',
      'change of shell lot (tare)',
      'speed change',
      'stop and restart',
      'an adjustment nobody recorded',
    ],
    firstCheck: 'Event log first, machine second',
  },
  {
    id: 'position-every-index',
    pattern: 'One position low at every index',
    causes: ['short, worn or bent pin', 'weak or broken spring', 'feed blocked at that column', 'loose pin holder'],
    firstCheck: 'The pin at that position, stations 1 to 5',
  },
  {
    id: 'position-every-sixth-index',
    pattern: 'One position low at every sixth index',
    causes: ['disc bore worn, burred or caked in one group'],
    firstCheck: 'The bore of that group',
  },
  {
    id: 'position-every-segment',
    pattern: 'One position low or odd each time the same segment comes round',
    causes: ['segment bush chipped or dirty', 'body not seated'],
    firstCheck: 'That segment',
  },
  {
    id: 'one-end-low',
    pattern: 'All positions of one end low',
    causes: ['disc or pin holder tilted', 'clearance uneven', 'bed uneven'],
    firstCheck: 'Level, and clearance around the circle',
  },
  {
    id: 'all-low',
    pattern: 'All positions equally low',
    causes: ['station depth', 'disc', 'bed', 'speed', 'powder'],
    firstCheck: 'Settings against the last good run',
  },
  {
    id: 'spread-up',
    pattern: 'Spread up, mean steady',
    causes: ['lot of poor flow', 'low bed', 'worn pins or ring', 'transfer losses', 'too fast'],
    firstCheck: 'Carr index or Hausner ratio of the lot, bed, speed',
  },
  {
    id: 'alternation',
    pattern: 'High and low by turns',
    causes: ['over-adjustment', 'sampling in step with refills', 'two ejection lanes, operators or balances'],
    firstCheck: 'Lag-1 correlation, adjustment log',
  },
  {
    id: 'start-up-low',
    pattern: 'Low at start-up, then settling within 5 to 10 minutes',
    causes: ['bed and bores filling', 'shells and disc warming'],
    firstCheck: 'Discard rule, time since start',
  },
  {
    id: 'jump-after-refill',
    pattern: 'Jump up, then decay, after a refill',
    causes: ['fresh aerated or head-loaded powder'],
    firstCheck: 'Time since the refill',
  },
  {
    id: 'end-falling',
    pattern: 'Falling in the last minutes',
    causes: ['bowl emptying'],
    firstCheck: 'Cut-off rule for the end of the run',
  },
  {
    id: 'few-far-light',
    pattern: 'A few capsules far light, the rest normal',
    causes: ['broken slug', 'transfer loss', 'lost cap or body'],
    firstCheck: 'Powder on the segments; this is no problem of the mean',
  },
]
