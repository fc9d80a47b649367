import { onScopeDispose, readonly, ref } from 'vue'

/** Whether a media query holds, kept up to date. */
export function useMedia(query: string) {
  const list = window.matchMedia(query)
  const holds = ref(list.matches)
  const update = () => (holds.value = list.matches)
  list.addEventListener('change', update)
  onScopeDispose(() => list.removeEventListener('change', update))
  return readonly(holds)
}
