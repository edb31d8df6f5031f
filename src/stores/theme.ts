import { defineStore } from 'pinia'
import { computed, ref } from 'vue'

export type Theme = 'light' | 'dark'
const KEY = 'scruple.theme'

/** Light or dark: what the person chose, or what their system prefers. */
export const useThemeStore = defineStore('theme', () => {
  const prefersDark = matchMedia('(prefers-color-scheme: dark)')
  const systemTheme = ref<Theme>(prefersDark.matches ? 'dark' : 'light')
  const stored = localStorage.getItem(KEY)
  const chosen = ref<Theme | undefined>(stored === 'light' || stored === 'dark' ? stored : undefined)
  const theme = computed<Theme>(() => chosen.value ?? systemTheme.value)

  function apply(): void {
    document.documentElement.dataset['theme'] = theme.value
  }

  function toggle(): void {
    chosen.value = theme.value === 'dark' ? 'light' : 'dark'
    localStorage.setItem(KEY, chosen.value)
    apply()
  }

  prefersDark.addEventListener('change', ({ matches }) => {
    systemTheme.value = matches ? 'dark' : 'light'
    apply()
  })

  return { theme, apply, toggle }
})
