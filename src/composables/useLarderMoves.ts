import { ref } from 'vue'
import type { Move } from '#shared/larder/contract'
import { quantityWords } from '#shared/larder/quantity'
import type { Unit } from '#shared/larder/vocabulary'
import { moneyWords } from '#shared/units/money'
import { api } from '@/api'
import type { MoveDraft } from '@/components/larder/move-draft'
import { sayWhy } from './refusal.ts'
import { useToast } from './useToast.ts'

/** Does what the pad asks for, says what came of it, and offers the way back. `after` reads the shelf anew. */
export function useLarderMoves(after: () => Promise<unknown>) {
  const toast = useToast()
  const busy = ref(false)

  /** True when it went through; a refusal is said and the shelf read again, since someone may have been quicker. */
  async function move(ingredientId: string, unit: Unit, draft: MoveDraft): Promise<boolean> {
    busy.value = true
    try {
      const made = await send(ingredientId, draft)
      const slip = made.length === 1 ? made[0] : undefined
      toast.say(said(draft, made, unit), slip && { label: 'Undo', run: () => void undo(slip) })
      return true
    } catch (reason) {
      toast.fault(sayWhy(reason))
      return false
    } finally {
      busy.value = false
      await after()
    }
  }

  async function undo(slip: Move) {
    try {
      await api.larder.undoMove({ params: { id: slip.id }, body: {} })
      toast.say('Undone. The lot and your tab are as before.')
    } catch (reason) {
      toast.fault(sayWhy(reason))
    }
    await after()
  }

  return { busy, move, undo }
}

async function send(ingredientId: string, { lotId, ...body }: MoveDraft): Promise<Move[]> {
  if (lotId) return [await api.larder.addMove({ params: { id: lotId }, body })]
  const { quantity, batchId, note } = body
  const draw = await api.larder.drawIngredient({
    params: { id: ingredientId },
    body: { quantity, ...(batchId && { batchId }), ...(note && { note }) },
  })
  return draw.moves
}

function said({ reason, quantity }: MoveDraft, made: Move[], unit: Unit): string {
  const amount = quantityWords(quantity, unit)
  const costMinor = made.reduce((sum, move) => sum + move.costMinor, 0)
  const currency = made[0]?.currency ?? 'GBP'
  switch (reason) {
    case 'draw':
      return costMinor === 0
        ? `${amount} taken. It was a gift: nothing on your tab.`
        : `${amount} taken, ${moneyWords(costMinor, currency)} on your tab.`
    case 'top-up':
      return `${amount} put in.`
    case 'waste':
      return `${amount} written off.`
    case 'recount':
      return `Set to ${amount}.`
  }
}
