import { type InjectionKey, type Ref, inject, onScopeDispose, provide, ref, watch } from 'vue'
import type { CalendarDay } from '#shared/time/day'

const KEY: InjectionKey<Readonly<Ref<CalendarDay>>> = Symbol('today')

/** In App.vue: today in the time zone of the space, looked at again each minute and when the page comes back. */
export function provideToday(zone: Ref<string>) {
  // Swedish writes days as we do. The shared clock would bring the whole validation library into the first visit.
  const now = () => new Intl.DateTimeFormat('sv-SE', { timeZone: zone.value }).format() as CalendarDay
  const today = ref(now())
  const look = () => (today.value = now())
  const timer = setInterval(look, 60_000)
  document.addEventListener('visibilitychange', look)
  watch(zone, look)
  onScopeDispose(() => {
    clearInterval(timer)
    document.removeEventListener('visibilitychange', look)
  })
  provide(KEY, today)
  return today
}

/** Today, as the space counts days. */
export function useToday(): Readonly<Ref<CalendarDay>> {
  const today = inject(KEY)
  if (!today) throw new Error('useToday() needs provideToday() in the app')
  return today
}
