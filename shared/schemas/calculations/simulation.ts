import { z } from 'zod'

/** The same seed gives the same answer. */
export const Seed = z.int().min(0).max(4_294_967_295).optional().meta({ description: 'The same seed gives the same answer.' })

export const Probability = z.number().min(0).max(1)
