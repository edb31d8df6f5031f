import { z } from 'zod'

/** The building blocks that many schemas share; each says its unit and its limits once. */
export const Id = z.uuid({ error: 'An identifier (UUID) is expected.' })

/** A version that a person saw; a stale one is refused. */
export const Version = z.int().min(1)

/** A reason in words: not empty, not blanks. */
export const Reason = z.string().trim().min(3, 'Give a reason in words.').max(1_000)

export const UtcTime = z.iso.datetime({ precision: 3, error: 'A time in UTC is expected, such as 2026-03-01T09:30:00.000Z.' })

/** A time that a person states; zones are allowed, the service refuses the future. */
export const StatedTime = z.iso.datetime({ offset: true, error: 'A time with its zone is expected, such as 2026-03-01T09:30:00Z.' })

export const WeightMg = z
  .number()
  .positive('A weight is above zero.')
  .max(5_000, 'A capsule weighs less than 5000 mg.')
  .meta({ id: 'WeightMg', description: 'A weight in mg, as the balance showed it.', 'x-unit': 'mg' })
