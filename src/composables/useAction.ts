import { ref, shallowRef, type Ref, type ShallowRef } from 'vue'
import { ApiProblem } from '@/api/api-problem.ts'
import { newIdempotencyKey } from '@/api/client.ts'

/**
 * One deed a person does: it runs once at a time, keeps its idempotency key until it has succeeded (so that a second
 * try after a lost answer records nothing twice), and holds the problem for the page to show.
 */
export function useAction<A extends unknown[], T>(
  act: (idempotencyKey: string, ...parameters: A) => Promise<T>,
): { isRunning: Ref<boolean>; problem: ShallowRef<ApiProblem | undefined>; run: (...parameters: A) => Promise<T | undefined> } {
  const isRunning = ref(false)
  const problem = shallowRef<ApiProblem>()
  let key = newIdempotencyKey()

  async function run(...parameters: A): Promise<T | undefined> {
    if (isRunning.value) return undefined
    isRunning.value = true
    problem.value = undefined
    try {
      const answer = await act(key, ...parameters)
      key = newIdempotencyKey()
      return answer
    } catch (error) {
      if (!(error instanceof ApiProblem)) throw error
      problem.value = error
      // Only an unknown outcome is tried again under the same key; after a refusal the next try is another deed.
      if (error.slug !== 'offline') key = newIdempotencyKey()
      return undefined
    } finally {
      isRunning.value = false
    }
  }

  return { isRunning, problem, run }
}
