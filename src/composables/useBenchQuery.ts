import { computed, shallowRef, watch, type ComputedRef } from 'vue'
import { useRoute, useRouter, type LocationQuery } from 'vue-router'
import { answerTo, type Outcome } from '@/components/brewing/bench-answer'
import { PLAIN_UNITS, queryOf, typedFrom, unitsFrom, type Typed } from '@/components/brewing/bench-state'
import type { Question, Units } from '@/components/brewing/question'
import { useToday } from './useToday.ts'

const NOTHING: Outcome = { answer: undefined, errors: {}, missing: [] }
const plain = (query: LocationQuery): Record<string, string | undefined> =>
  Object.fromEntries(
    Object.entries(query).map(([key, value]) => [key, typeof value === 'string' ? value : undefined]),
  )

/** What stands in the fields of a question, kept in step with the address, so that a link shows the same elsewhere. */
export function useBenchQuery(question: ComputedRef<Question | undefined>) {
  const route = useRoute()
  const router = useRouter()
  const today = useToday()
  const typed = shallowRef<Typed>({})
  const units = shallowRef<Units>(PLAIN_UNITS)
  let written = ''

  const read = () => {
    const query = plain(route.query)
    units.value = unitsFrom(query)
    typed.value = question.value ? typedFrom(question.value, query, today.value) : {}
  }
  // Set before anything is drawn; afterwards only for addresses that did not come from here.
  read()
  watch(
    () => route.fullPath,
    (path) => {
      if (path !== written) read()
    },
    { flush: 'sync' },
  )
  watch([typed, units], () => {
    if (!question.value || route.name !== 'bench') return
    const location = { name: 'bench' as const, query: queryOf(question.value, typed.value, units.value) }
    written = router.resolve(location).fullPath
    if (written !== route.fullPath) void router.replace(location)
  })

  return {
    typed,
    units,
    today,
    outcome: computed(() =>
      question.value ? answerTo(question.value, typed.value, units.value, today.value) : NOTHING,
    ),
    reset: () => {
      if (question.value) typed.value = typedFrom(question.value, {}, today.value)
    },
  }
}
