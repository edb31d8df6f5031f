import { phEur295, type PhEur295Answer, type PhEur295Request } from './ph-eur-2.9.5.ts'
import { usp2091, type Usp2091Answer, type Usp2091Request } from './usp-2091.ts'
import { usp905Weight, type Usp905WeightRequest, type WeightUniformityAnswer } from './usp-905-weight.ts'
import { usp905, type UniformityAnswer, type Usp905Request } from './usp-905.ts'

/** Every standard, in the order of the menus. */
export const STANDARDS = [usp905, usp905Weight, usp2091, phEur295] as const

export type UniformityRequest = Usp905Request | Usp905WeightRequest | Usp2091Request | PhEur295Request

export type UniformityVerdictAnswer = UniformityAnswer | WeightUniformityAnswer | Usp2091Answer | PhEur295Answer

/**
 * Judges weights or contents by the standard that the request names.
 * @throws {StatisticsError} as the standard's own rule says: wrong number of units, a value that is no weight
 * @see the edition that the answer names; docs/calculations/acceptance.md
 */
export function judgeUniformity(request: Usp905Request): UniformityAnswer
export function judgeUniformity(request: Usp905WeightRequest): WeightUniformityAnswer
export function judgeUniformity(request: Usp2091Request): Usp2091Answer
export function judgeUniformity(request: PhEur295Request): PhEur295Answer
export function judgeUniformity(request: UniformityRequest): UniformityVerdictAnswer
export function judgeUniformity(request: UniformityRequest): UniformityVerdictAnswer {
  switch (request.standard) {
    case 'usp-905':
      return usp905.judge(request)
    case 'usp-905-weight':
      return usp905Weight.judge(request)
    case 'usp-2091':
      return usp2091.judge(request)
    case 'ph-eur-2.9.5':
      return phEur295.judge(request)
  }
}
