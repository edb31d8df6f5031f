import { onScopeDispose, shallowRef, watch, type ShallowRef } from 'vue'
import { ApiProblem } from '@/api/api-problem.ts'

export type Resource<T> = { status: 'loading' } | { status: 'ready'; value: T } | { status: 'failed'; problem: ApiProblem }

/**
 * Loads now and whenever `key` changes. The last call wins, a late answer is dropped, leaving the page aborts.
 * `reload` keeps what is shown until the new answer is there.
 */
export function useResource<K, T>(
  key: () => K,
  load: (key: K, signal: AbortSignal) => Promise<T>,
): { resource: ShallowRef<Resource<T>>; reload: () => Promise<void> } {
  const resource: ShallowRef<Resource<T>> = shallowRef({ status: 'loading' })
  let inFlight: AbortController | undefined

  async function reload(): Promise<void> {
    inFlight?.abort()
    const mine = (inFlight = new AbortController())
    const isLate = (): boolean => mine !== inFlight || mine.signal.aborted
    try {
      const value = await load(key(), mine.signal)
      if (!isLate()) resource.value = { status: 'ready', value }
    } catch (error) {
      if (isLate()) return
      if (!(error instanceof ApiProblem)) throw error
      resource.value = { status: 'failed', problem: error }
    }
  }

  watch(
    key,
    () => {
      resource.value = { status: 'loading' }
      return reload()
    },
    { immediate: true },
  )
  onScopeDispose(() => inFlight?.abort())
  return { resource, reload }
}
