import { ref, shallowRef } from 'vue'
import type { Loan } from '#shared/loans/contract'
import type { CalendarDay } from '#shared/time/day'
import { dayInWords } from '#shared/time/day-words'
import { api } from '@/api'
import { sayWhy } from './refusal.ts'
import { useConfirm } from './useConfirm.ts'
import { useToast } from './useToast.ts'

/** What a borrower can do with a loan from wherever it is shown: keep it longer, or give it up. */
export function useLoanActs(changed: () => Promise<unknown>) {
  const toast = useToast()
  const confirm = useConfirm()
  const extending = shallowRef<Loan>()
  const busy = ref(false)
  const error = ref<string>()

  function startExtending(loan: Loan) {
    error.value = undefined
    extending.value = loan
  }

  async function extend(to: CalendarDay) {
    const loan = extending.value
    if (!loan) return
    busy.value = true
    try {
      const after = await api.loans.extend({ params: { id: loan.id }, body: { to } })
      toast.say(
        after.to === to
          ? `Yours until ${dayInWords(to)}.`
          : 'Somebody waits for it, so a steward decides. You get an e-mail.',
      )
      extending.value = undefined
      await changed()
    } catch (reason) {
      error.value = sayWhy(reason)
    } finally {
      busy.value = false
    }
  }

  async function giveUp(loan: Loan) {
    const sure = await confirm({
      title: `Give up ${loan.kindName}?`,
      text: `It is free for others from ${dayInWords(loan.from)} at once.`,
      act: 'I don’t need it',
      keep: 'Keep it',
    })
    if (!sure) return
    try {
      await api.loans.cancel({ params: { id: loan.id }, body: {} })
      toast.say('Given up. Somebody else can have it.')
    } catch (reason) {
      toast.fault(sayWhy(reason))
    }
    await changed()
  }

  return { extending, busy, error, startExtending, extend, giveUp }
}
