/**
 * A generic list of steps in our own words for a change of size parts; a site writes its own over it. Order and phases are
 * common practice (trade knowledge, §6); torque, gaps and tolerances always come from the machine's manual.
 */
export const GENERIC_CHANGEOVER_STEPS: readonly string[] = [
  'Line clearance: product, shells and papers of the last batch are gone; a second person has looked',
  'Stop, tell those near, isolate every source of energy, lock and tag, try to start: it must not',
  'Take off guards, hopper and bowl (two people or a lifting aid for heavy parts)',
  'Take out dosing disc, tamping pins, segments and feed parts; lay pins on a soft surface, tips free',
  'Clean; look at disc bores, pin tips, springs, seal ring, bushes and scraper',
  'Fit segments and bushes with the alignment pins before tightening; torque as the manual says',
  'Fit the dosing disc and the pin sets, each at its own station; note the numbers',
  'Measure the clearance of disc to ring at several places round the circle; spacers only as the manual allows',
  'Set the zero of every depth scale and note it',
  'Turn one full cycle by hand as the manual allows: no rubbing, no pin touching a bore',
  'Count the tools out, fit the guards, clear people, take off the locks',
  'Run empty, then with shells only, then with powder; each is good before the next begins',
]

/** What everybody who reaches into a machine has to have read. The machine's manual, the site's procedures and local codes come first. */
export const CHANGEOVER_CAUTIONS: readonly string[] = [
  'Isolate, lock and tag before a guard is opened; a stop is not an isolation. Try to start before you reach in.',
  'Air, vacuum, springs and raised parts hold energy: release or block them.',
  'Disc, bowl and hopper are heavy: two people or a lifting aid.',
  'Pin tips and scraper edges are sharp and fragile: gloves, soft surface, nothing forced.',
  'Powder dust can harm and can burn: extract, do not blow; follow the data sheet of the product.',
  'Only trained people, by the machine’s manual, the site’s procedures and local codes.',
]
