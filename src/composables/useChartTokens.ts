import { nextTick, shallowRef, watch, type ShallowRef } from 'vue'
import { readChartTokens, type ChartTokens } from '@/charts/tokens.ts'
import { useThemeStore } from '@/stores/theme.ts'

/** The chart colours of the present theme; they change with it. */
export function useChartTokens(): ShallowRef<ChartTokens> {
  const theme = useThemeStore()
  const tokens = shallowRef(readChartTokens())
  watch(
    () => theme.theme,
    async () => {
      await nextTick()
      tokens.value = readChartTokens()
    },
  )
  return tokens
}
