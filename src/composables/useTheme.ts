import { computed, ref } from 'vue'
import { useMedia } from './useMedia.ts'

export const THEME_CHOICES = ['device', 'light', 'dark'] as const
export type ThemeChoice = (typeof THEME_CHOICES)[number]

const KEY = 'barmhouse-theme'
const choice = ref<ThemeChoice>('device')

function apply(theme: ThemeChoice) {
  choice.value = theme
  if (theme === 'device') delete document.documentElement.dataset.theme
  else document.documentElement.dataset.theme = theme
}

/** Before the first drawing: the choice kept on this device. A device that keeps nothing follows its own setting. */
export function restoreTheme() {
  try {
    const kept = localStorage.getItem(KEY)
    apply(THEME_CHOICES.find((theme) => theme === kept) ?? 'device')
  } catch {
    apply('device')
  }
}

export function useTheme() {
  const deviceIsDark = useMedia('(prefers-color-scheme: dark)')
  return {
    choice: computed({
      get: () => choice.value,
      set: (theme) => {
        apply(theme)
        try {
          localStorage.setItem(KEY, theme)
        } catch {
          // Storage is shut (private window): the choice holds until the page is closed.
        }
      },
    }),
    isDark: computed(() => (choice.value === 'device' ? deviceIsDark.value : choice.value === 'dark')),
  }
}
