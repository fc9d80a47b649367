import { type InjectionKey, inject, provide, shallowRef } from 'vue'

export interface Question {
  title: string
  /** What will happen, in one or two sentences. */
  text?: string
  /** Says what happens: "Decline the loan", never "OK". */
  act: string
  /** The way out, focused first. */
  keep?: string
  /** An act that loses something. */
  severe?: boolean
}

type Ask = (question: Question) => Promise<boolean>
const KEY: InjectionKey<Ask> = Symbol('confirm')

/** In App.vue: holds the open question, which `ConfirmDialog` shows. */
export function provideConfirm() {
  const question = shallowRef<Question>()
  let resolve: ((yes: boolean) => void) | undefined

  function answer(yes: boolean) {
    question.value = undefined
    resolve?.(yes)
    resolve = undefined
  }
  provide(KEY, (asked) => {
    resolve?.(false)
    question.value = asked
    return new Promise((done) => (resolve = done))
  })
  return { question, answer }
}

/** `if (!(await confirm({ title: 'Decline this loan?', act: 'Decline it' }))) return` */
export function useConfirm(): Ask {
  const ask = inject(KEY)
  if (!ask) throw new Error('useConfirm() needs provideConfirm() in the app')
  return ask
}
