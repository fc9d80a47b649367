import { type WatchSource, computed, onScopeDispose, shallowRef, watch } from 'vue'

export interface RequestOptions<T> {
  /** When what came back counts as nothing. Lists and pages without items do by themselves. */
  isEmpty?: (data: T) => boolean
  /** Asks again when one of these changes. */
  watch?: WatchSource | WatchSource[]
  /** False: wait for the first `reload()`. */
  immediate?: boolean
}

export type RequestState = 'waiting' | 'failed' | 'empty' | 'full'

/**
 * Asks for something and keeps the newest answer. Answers that arrive after a later question are dropped. While it
 * asks again the old answer stays in sight (`refreshing`).
 */
export function useRequest<T>(load: (signal: AbortSignal) => Promise<T>, options: RequestOptions<T> = {}) {
  const data = shallowRef<T>()
  const error = shallowRef<unknown>()
  const pending = shallowRef(false)
  const isEmpty = options.isEmpty ?? holdsNothing
  let running: AbortController | undefined

  async function reload() {
    running?.abort()
    const mine = (running = new AbortController())
    pending.value = true
    try {
      const answer = await load(mine.signal)
      if (running !== mine) return
      data.value = answer
      error.value = undefined
    } catch (reason) {
      if (running !== mine) return
      error.value = reason ?? new Error('failed')
    }
    pending.value = false
  }

  if (options.watch) watch(options.watch, () => void reload())
  if (options.immediate !== false) void reload()
  onScopeDispose(() => {
    running?.abort()
    running = undefined
  }, true)

  return {
    data,
    error,
    state: computed<RequestState>(() => {
      if (data.value !== undefined && error.value === undefined) return isEmpty(data.value) ? 'empty' : 'full'
      return error.value === undefined ? 'waiting' : 'failed'
    }),
    refreshing: computed(() => pending.value && data.value !== undefined),
    reload,
  }
}

function holdsNothing(data: unknown): boolean {
  if (Array.isArray(data)) return data.length === 0
  if (typeof data === 'object' && data !== null && 'items' in data) return holdsNothing(data.items)
  return data === null
}
