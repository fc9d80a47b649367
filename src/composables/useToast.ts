import { type InjectionKey, inject, onScopeDispose, provide, shallowRef } from 'vue'

export interface Toast {
  id: number
  text: string
  tone: 'sound' | 'fault'
  /** A way back: "Undo". */
  act?: { label: string; run: () => void }
}

export interface Toaster {
  /** It worked: "Taken back, to the sink." */
  say: (text: string, act?: Toast['act']) => void
  /** It did not, and it was not about a field. Stays until it is closed. */
  fault: (text: string) => void
}

const KEY: InjectionKey<Toaster> = Symbol('toast')
const STAYS_MS = 6000

/** In App.vue: holds the toasts, which `ToastRegion` shows. */
export function provideToasts() {
  const toasts = shallowRef<Toast[]>([])
  const timers = new Set<ReturnType<typeof setTimeout>>()
  let last = 0

  const close = (id: number) => (toasts.value = toasts.value.filter((toast) => toast.id !== id))
  function add(toast: Omit<Toast, 'id'>) {
    const id = (last += 1)
    toasts.value = [...toasts.value.slice(-2), { ...toast, id }]
    if (toast.tone === 'fault') return
    const timer = setTimeout(() => {
      timers.delete(timer)
      close(id)
    }, STAYS_MS)
    timers.add(timer)
  }
  onScopeDispose(() => timers.forEach(clearTimeout))

  provide(KEY, {
    say: (text, act) => add({ text, tone: 'sound', act }),
    fault: (text) => add({ text, tone: 'fault' }),
  })
  return { toasts, close }
}

export function useToast(): Toaster {
  const toaster = inject(KEY)
  if (!toaster) throw new Error('useToast() needs provideToasts() in the app')
  return toaster
}
