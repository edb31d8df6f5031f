import { StatisticsError } from '../errors.ts'

const MAX_STEPS = 300

/**
 * The place where a rising or falling function passes zero between two ends, by bisection that takes a secant step
 * whenever that falls well inside (the ITP idea, in its plain regula-falsi form): it cannot leave the bracket.
 * @param f continuous, of different sign at the two ends
 * @throws {StatisticsError} `no-convergence` when both ends have the same sign
 */
export function findRoot(f: (x: number) => number, lower: number, upper: number, relativePrecision = 1e-15): number {
  let a = lower
  let b = upper
  let fa = f(a)
  let fb = f(b)
  if (fa === 0) return a
  if (fb === 0) return b
  if (fa > 0 === fb > 0) throw new StatisticsError('no-convergence', 'bracket', `No root was found between ${lower} and ${upper}.`)
  let side = 0
  for (let step = 0; step < MAX_STEPS && Math.abs(b - a) > relativePrecision * Math.max(Math.abs(a), Math.abs(b), 1e-300); step++) {
    const secant = (a * fb - b * fa) / (fb - fa)
    const x = step % 3 === 2 || !(secant > Math.min(a, b) && secant < Math.max(a, b)) ? (a + b) / 2 : secant
    const fx = f(x)
    if (fx === 0) return x
    if (fx > 0 === fb > 0) {
      b = x
      fb = fx
      if (side === -1) fa /= 2
      side = -1
    } else {
      a = x
      fa = fx
      if (side === 1) fb /= 2
      side = 1
    }
  }
  return (a + b) / 2
}

/** Doubles an upper end until the function has changed its sign there. */
export function bracketAbove(f: (x: number) => number, start: number): number {
  let upper = start
  const sign = f(0) > 0
  for (let step = 0; step < 1_100 && f(upper) > 0 === sign; step++) upper *= 2
  return upper
}
