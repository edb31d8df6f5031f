import { computed, type ComputedRef, type ShallowRef } from 'vue'
import { useRoute } from 'vue-router'
import { useSessionStore } from '@/stores/session.ts'
import { useResource, type Resource } from './useResource.ts'

/** The record of a form's page: undefined for a new one, else found in the list of the site. */
export function useMasterRecord<R extends { id: string }>(
  load: (siteId: string, signal: AbortSignal) => Promise<R[]>,
): {
  siteId: ComputedRef<string>
  isNew: ComputedRef<boolean>
  resource: ShallowRef<Resource<R | undefined>>
  reload: () => Promise<void>
} {
  const route = useRoute()
  const session = useSessionStore()
  const siteId = computed(() => session.site?.id ?? '')
  const id = computed(() => (typeof route.params['id'] === 'string' ? route.params['id'] : ''))
  const isNew = computed(() => id.value === '')
  const { resource, reload } = useResource(
    () => id.value,
    async (wanted, signal) => (wanted === '' ? undefined : (await load(siteId.value, signal)).find((record) => record.id === wanted)),
  )
  return { siteId, isNew, resource, reload }
}
