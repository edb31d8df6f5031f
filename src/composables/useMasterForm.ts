import { computed, reactive, ref, type ComputedRef, type Ref, type ShallowRef } from 'vue'
import type { z } from 'zod'
import type { ApiProblem } from '@/api/api-problem.ts'
import { useAction } from './useAction.ts'

/** Somebody else saved meanwhile: the record as it is now, and its version. */
export interface StaleRecord {
  version: number
  current: Readonly<Record<string, unknown>>
}

export interface MasterForm<D> {
  draft: D
  isRunning: Ref<boolean>
  problem: ShallowRef<ApiProblem | undefined>
  stale: ComputedRef<StaleRecord | undefined>
  /** What is wrong with a field, by its JSON pointer: by the schema once saving was tried, or by the server. */
  messageFor: (pointer: string) => string | undefined
  /** Checks, saves and answers; undefined when something was wrong. */
  submit: () => Promise<boolean>
}

const isRecord = (value: unknown): value is Record<string, unknown> => typeof value === 'object' && value !== null

function staleRecord(problem: ApiProblem | undefined): StaleRecord | undefined {
  if (problem?.slug !== 'stale-version') return undefined
  const { currentVersion, current } = problem.facts
  return typeof currentVersion === 'number' && isRecord(current) ? { version: currentVersion, current } : undefined
}

/**
 * A form for one record: the draft that is typed, checked by the same schema as the server's, saved once at a time, and
 * with the server's own refusals at the fields that they name.
 */
export function useMasterForm<D extends object, R, A>(options: {
  draft: D
  schema: z.ZodType<R>
  save: (request: R, idempotencyKey: string) => Promise<A>
  done: (answer: A) => unknown
}): MasterForm<D> {
  const draft = reactive(options.draft)
  const wasTried = ref(false)
  const { isRunning, problem, run } = useAction((key, request: R) => options.save(request, key))
  // Reading every field of the reactive draft, so that the messages follow the typing.
  const parsed = computed(() => options.schema.safeParse(JSON.parse(JSON.stringify(draft))))
  const typed = computed(() => {
    const messages = new Map<string, string>()
    for (const { path, message } of parsed.value.error?.issues ?? []) {
      const pointer = `/${path.map(String).join('/')}`
      // The first message is the plainest: an empty code is missing before it is misspelt.
      if (!messages.has(pointer)) messages.set(pointer, message)
    }
    return messages
  })

  async function submit(): Promise<boolean> {
    wasTried.value = true
    if (!parsed.value.success) return false
    const answer = await run(parsed.value.data)
    if (answer === undefined) return false
    await options.done(answer)
    return true
  }

  return {
    // The draft is a plain object of fields, for which the unwrapped reactive type is the type itself.
    draft: draft as D,
    isRunning,
    problem,
    stale: computed(() => staleRecord(problem.value)),
    messageFor: (pointer) => (wasTried.value ? typed.value.get(pointer) : undefined) ?? problem.value?.messageFor(pointer),
    submit,
  }
}
