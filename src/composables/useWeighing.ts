import { computed, ref, shallowRef, type ComputedRef, type Ref, type ShallowRef } from 'vue'
import type { SampleAnswer, WeighingKept } from '#shared/schemas/samples.ts'
import { ApiProblem } from '@/api/api-problem.ts'
import { putWeighing } from '@/api/samples.ts'

const RETRY_MS = 1_500

export interface Reading {
  weightMg: number
  decimals: number
}

/**
 * The hand at the balance: takes readings one after the other, sends each until the server has it, and only then counts
 * it as kept. A reading that was sent twice is the same deed for the server, so nothing doubles.
 */
export function useWeighing(sample: () => SampleAnswer): {
  kept: ShallowRef<WeighingKept[]>
  next: ComputedRef<number>
  isSending: Ref<boolean>
  isWaiting: Ref<boolean>
  problem: ShallowRef<ApiProblem | undefined>
  doubtful: ShallowRef<Reading | undefined>
  keep: (reading: Reading, isConfirmed?: boolean) => Promise<boolean>
} {
  const kept = shallowRef<WeighingKept[]>([])
  const isSending = ref(false)
  const isWaiting = ref(false)
  const problem = shallowRef<ApiProblem>()
  const doubtful = shallowRef<Reading>()
  const next = computed(() => sample().weighings.length + kept.value.length + 1)

  /** Tries again while the network or the database is away; any other refusal is for the person to see. */
  async function send(reading: Reading, isConfirmed: boolean): Promise<WeighingKept> {
    const { id, basis } = sample()
    const weight = basis === 'net-individual' ? { netMg: reading.weightMg } : { grossMg: reading.weightMg }
    for (;;) {
      try {
        return await putWeighing(id, next.value, { ...weight, shownDecimals: reading.decimals, isConfirmed })
      } catch (error) {
        if (!(error instanceof ApiProblem) || (error.slug !== 'offline' && error.slug !== 'unavailable')) throw error
        isWaiting.value = true
        await new Promise((resolve) => setTimeout(resolve, RETRY_MS))
      }
    }
  }

  async function keep(reading: Reading, isConfirmed = false): Promise<boolean> {
    if (isSending.value || next.value > sample().plannedN) return false
    isSending.value = true
    problem.value = undefined
    doubtful.value = undefined
    try {
      kept.value = [...kept.value, await send(reading, isConfirmed)]
      return true
    } catch (error) {
      if (!(error instanceof ApiProblem)) throw error
      if (error.slug === 'implausible-weight') doubtful.value = reading
      problem.value = error
      return false
    } finally {
      isSending.value = false
      isWaiting.value = false
    }
  }

  return { kept, next, isSending, isWaiting, problem, doubtful, keep }
}
