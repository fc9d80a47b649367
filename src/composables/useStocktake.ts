import { computed, ref, watch, type Ref } from 'vue'
import type { Lot } from '#shared/larder/contract'

/** What was counted of a lot, and what the app said at that moment: the two go to the server together. */
export interface Count {
  counted: number
  seen: number
}

export type CountState = 'open' | 'same' | 'differs' | 'moved'

/** A lot that moved after it was counted has to be counted again. */
export function countState(lot: Lot, count: Count | undefined): CountState {
  if (!count) return 'open'
  if (count.seen !== lot.remaining) return 'moved'
  return count.counted === lot.remaining ? 'same' : 'differs'
}

interface Kept {
  startedAt: string
  counts: Record<string, Count>
}

/** Counts typed while walking the shelf. They stay on this device until they are committed or dropped, through any reload. */
export function useStocktake(memberId: string, lots: Ref<readonly Lot[]>) {
  const key = `barmhouse-stocktake-${memberId}`
  const kept = read(key)
  const counts = ref<Record<string, Count>>(kept?.counts ?? {})
  const startedAt = ref(kept?.startedAt ?? '')
  /** True when counts of an earlier visit were found. */
  const resumed = kept !== undefined

  watch(
    counts,
    () => {
      if (Object.keys(counts.value).length === 0) return forget()
      startedAt.value ||= new Date().toISOString()
      keep(key, { startedAt: startedAt.value, counts: counts.value })
    },
    { deep: true },
  )
  function forget() {
    startedAt.value = ''
    keep(key, undefined)
  }

  function set(lot: Lot, counted: number | undefined) {
    const next = { ...counts.value }
    if (counted === undefined || !Number.isFinite(counted) || counted < 0)
      Reflect.deleteProperty(next, lot.id)
    else next[lot.id] = { counted, seen: lot.remaining }
    counts.value = next
  }

  const counted = computed(() =>
    lots.value.flatMap((lot) => {
      const count = counts.value[lot.id]
      return count ? [{ lot, count, state: countState(lot, count) }] : []
    }),
  )
  return {
    counts,
    startedAt,
    resumed,
    set,
    counted,
    moved: computed(() => counted.value.filter(({ state }) => state === 'moved')),
    differences: computed(() => counted.value.filter(({ state }) => state === 'differs')),
    clear: () => (counts.value = {}),
  }
}

function read(key: string): Kept | undefined {
  try {
    const kept = JSON.parse(localStorage.getItem(key) ?? 'null') as Kept | null
    return kept && typeof kept.counts === 'object' ? kept : undefined
  } catch {
    return undefined
  }
}

function keep(key: string, value: Kept | undefined) {
  try {
    if (value) localStorage.setItem(key, JSON.stringify(value))
    else localStorage.removeItem(key)
  } catch {
    // Storage is shut (private window): the counts last as long as the page.
  }
}
