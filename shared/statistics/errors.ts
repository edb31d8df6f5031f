/** What is wrong with the input of a calculation, as a word a program can rely on. */
export type StatisticsErrorCode =
  | 'too-few-values'
  | 'too-many-values'
  | 'not-finite'
  | 'not-whole'
  | 'not-positive'
  | 'out-of-range'
  | 'limits-crossed'
  | 'lengths-differ'
  | 'no-variation'
  | 'unknown-option'
  | 'not-supported'
  | 'no-convergence'

/**
 * The only error that `shared/statistics` throws: a calculation that cannot give a true figure gives none.
 * `argument` names the input at fault as the caller wrote it, so that a message can point at a field.
 */
export class StatisticsError extends Error {
  override readonly name = 'StatisticsError'
  constructor(
    readonly code: StatisticsErrorCode,
    readonly argument: string,
    message: string,
  ) {
    super(message)
  }
}

/**
 * Refuses anything but a finite number.
 * @throws {StatisticsError} `not-finite`
 */
export function requireFinite(argument: string, value: number): void {
  if (!Number.isFinite(value)) throw new StatisticsError('not-finite', argument, `${argument} must be a finite number, but is ${value}.`)
}

/**
 * Refuses anything but a whole number inside the bounds.
 * @throws {StatisticsError} `not-whole`, `out-of-range`
 */
export function requireWhole(argument: string, value: number, { min, max }: { min: number; max: number }): void {
  if (!Number.isInteger(value)) throw new StatisticsError('not-whole', argument, `${argument} must be a whole number, but is ${value}.`)
  if (value < min || value > max) {
    throw new StatisticsError('out-of-range', argument, `${argument} must lie from ${min} to ${max}, but is ${value}.`)
  }
}

/**
 * Refuses a share that is not strictly between 0 and 1 (a confidence, a coverage, a significance level).
 * @throws {StatisticsError} `not-finite`, `out-of-range`
 */
export function requireShare(argument: string, value: number): void {
  requireFinite(argument, value)
  if (value <= 0 || value >= 1) {
    throw new StatisticsError('out-of-range', argument, `${argument} must lie between 0 and 1, but is ${value}.`)
  }
}

/**
 * Refuses a number that is not finite and above zero.
 * @throws {StatisticsError} `not-finite`, `not-positive`
 */
export function requirePositive(argument: string, value: number): void {
  requireFinite(argument, value)
  if (value <= 0) throw new StatisticsError('not-positive', argument, `${argument} must be above zero, but is ${value}.`)
}

/**
 * Refuses a list that is too short or holds a value that is not finite; the message names the place, counted from 0.
 * @throws {StatisticsError} `too-few-values`, `not-finite`
 */
export function requireValues(argument: string, values: ArrayLike<number>, { min }: { min: number }): void {
  if (values.length < min) {
    throw new StatisticsError('too-few-values', argument, `${argument} needs at least ${min} values, but has ${values.length}.`)
  }
  for (let place = 0; place < values.length; place++) {
    if (!Number.isFinite(values[place])) {
      throw new StatisticsError('not-finite', `${argument}[${place}]`, `${argument}[${place}] must be a finite number, but is ${values[place]}.`)
    }
  }
}
