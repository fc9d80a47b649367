import { computed, reactive, ref, shallowRef, toRaw, useId } from 'vue'
import { asRefusal, sayWhy } from './refusal.ts'

/** What a form asks of its rule; every zod schema is one. */
export interface Rule {
  safeParse: (value: unknown) => { success: boolean; data?: unknown; error?: { issues: readonly Issue[] } }
}
type Parsed<R extends Rule> = Extract<ReturnType<R['safeParse']>, { success: true }>['data']
interface Issue {
  path: readonly PropertyKey[]
  message: string
}

export interface FormError {
  /** Field path, `lines.0.from`; empty when it concerns the whole form. */
  path: string
  message: string
  /** Id of the control to go to. */
  id: string
}

/**
 * A form whose rule is the request schema. Checked on submit, never while typing; what was typed is kept; messages of
 * the server land beside the same fields as our own.
 *
 *     const form = useForm(LoanRequest, { from: '', to: '' })
 *     <form novalidate @submit.prevent="form.submit(send)">
 *       <ErrorSummary :errors="form.errors.value" />
 *       <TextField v-bind="form.field('from')" v-model="form.values.from" label="Collect" />
 */
export function useForm<R extends Rule, V extends object>(rule: R, initial: V) {
  const base = useId()
  const values = reactive(structuredClone(toRaw(initial))) as V
  const errors = shallowRef<FormError[]>([])
  const busy = ref(false)
  /** Counts failed tries, so that the summary takes focus again each time. */
  const tries = ref(0)

  const idOf = (path: string) => `${base}-${path.replaceAll('.', '-') || 'form'}`

  function fail(found: { path: string; message: string }[]) {
    const first = new Map<string, FormError>()
    for (const { path, message } of found) {
      if (!first.has(path)) first.set(path, { path, message, id: idOf(path) })
    }
    errors.value = [...first.values()]
    tries.value += 1
  }

  /** Runs `act` with the checked values. True when it went through. */
  async function submit(act: (body: Parsed<R>) => Promise<unknown>): Promise<boolean> {
    if (busy.value) return false
    const checked = rule.safeParse(cleaned(values))
    if (!checked.success) {
      fail(wordIssues(checked.error?.issues ?? [], rule.safeParse(values).error?.issues ?? []))
      return false
    }
    busy.value = true
    try {
      await act(checked.data)
      errors.value = []
      return true
    } catch (reason) {
      const fields = asRefusal(reason)?.fields ?? []
      fail(fields.length > 0 ? fields : [{ path: '', message: sayWhy(reason) }])
      return false
    } finally {
      busy.value = false
    }
  }

  return {
    values,
    errors,
    busy,
    tries,
    submit,
    fail,
    /** Props of a field: its id and, when there is one, its message. */
    field: (path: string) => ({
      id: idOf(path),
      error: errors.value.find((error) => error.path === path)?.message,
    }),
    /** Message that belongs to no field. */
    formError: computed(() => errors.value.find((error) => error.path === '')?.message),
    reset(next: V = initial) {
      Object.assign(values, structuredClone(toRaw(next)))
      errors.value = []
    },
  }
}

/** What the rule says of an empty text ("Write your e-mail address.") beats what it says of something missing. */
function wordIssues(missing: readonly Issue[], empty: readonly Issue[]) {
  return missing.map(({ path, message }) => {
    const at = path.join('.')
    return { path: at, message: empty.find((issue) => issue.path.join('.') === at)?.message ?? message }
  })
}

/** An untouched optional field is an empty text on screen and absent in the request. */
function cleaned(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(cleaned)
  if (typeof value !== 'object' || value === null) return value === '' ? undefined : value
  return Object.fromEntries(Object.entries(value).map(([key, part]) => [key, cleaned(part)]))
}
