import { ref, shallowRef } from 'vue'
import type { Batch } from '#shared/batches/contract'
import type { BatchStep } from '#shared/batches/plan-contract'
import { api } from '@/api'
import { sayWhy } from './refusal.ts'
import type { useBatch } from './useBatch.ts'
import { useToast } from './useToast.ts'

/** Ticking, unticking and moving the steps of a batch. */
export function useStepActs(book: ReturnType<typeof useBatch>, batch: () => Batch) {
  const toast = useToast()
  const busyId = ref<string>()
  const moving = shallowRef<BatchStep>()
  const moveOpen = ref(false)

  async function act(stepId: string, run: () => Promise<BatchStep>, say: (step: BatchStep) => string) {
    busyId.value = stepId
    try {
      const step = await run()
      await book.refresh()
      toast.say(say(step))
    } catch (reason) {
      toast.fault(sayWhy(reason))
    } finally {
      busyId.value = undefined
    }
  }

  const params = (stepId: string) => ({ id: batch().id, stepId })
  const done = (stepId: string) =>
    act(
      stepId,
      () => api.batches.stepDone({ params: params(stepId), body: {} }),
      (step) => `${step.title}: ticked.`,
    )
  const undone = (stepId: string) =>
    act(
      stepId,
      () => api.batches.stepUndone({ params: params(stepId) }),
      (step) => `${step.title}: the tick is off.`,
    )

  function startMove(stepId: string) {
    moving.value = batch().steps.find(({ id }) => id === stepId)
    moveOpen.value = moving.value !== undefined
  }
  async function move(body: { stepId: string; on: string; alone: boolean; confirm: boolean }) {
    const answer = await api.batches.movePlan({ params: { id: batch().id }, body })
    if (body.confirm) {
      await book.refresh()
      toast.say('The plan is moved.')
    }
    return answer
  }

  return { busyId, done, undone, moving, moveOpen, startMove, move }
}
