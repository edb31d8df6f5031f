import { onScopeDispose, ref, type Ref } from 'vue'

const SIGNS_OF_LIFE = ['pointerdown', 'keydown', 'wheel', 'touchstart'] as const

/** Counts the time without a hand on the screen: warns for the last seconds, then locks until `unlock`. */
export function useIdleClock({ lockAfterSeconds, warnSeconds }: { lockAfterSeconds: number; warnSeconds: number }): {
  secondsLeft: Ref<number | undefined>
  isLocked: Ref<boolean>
  unlock: () => void
} {
  const secondsLeft = ref<number>()
  const isLocked = ref(false)
  let lastSign = Date.now()

  function sign(): void {
    if (isLocked.value) return
    lastSign = Date.now()
    secondsLeft.value = undefined
  }

  function look(): void {
    const left = lockAfterSeconds - Math.floor((Date.now() - lastSign) / 1_000)
    isLocked.value ||= left <= 0
    secondsLeft.value = !isLocked.value && left <= warnSeconds ? left : undefined
  }

  function unlock(): void {
    isLocked.value = false
    sign()
  }

  const timer = setInterval(look, 1_000)
  for (const kind of SIGNS_OF_LIFE) addEventListener(kind, sign, { passive: true })
  onScopeDispose(() => {
    clearInterval(timer)
    for (const kind of SIGNS_OF_LIFE) removeEventListener(kind, sign)
  })
  return { secondsLeft, isLocked, unlock }
}
