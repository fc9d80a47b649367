import { computed } from 'vue'
import type { BatchPatch } from '#shared/batches/contract'
import { api } from '@/api'
import { useRequest } from './useRequest.ts'

/** A batch with its forecast, and the acts that change it; each act brings both up to date. */
export function useBatch(batchId: () => string) {
  const params = () => ({ id: batchId() })
  const batch = useRequest((signal) => api.batches.get({ params: params() }, { signal }), { watch: batchId })
  const forecast = useRequest((signal) => api.batches.forecast({ params: params() }, { signal }), {
    watch: batchId,
  })

  const refresh = () => Promise.all([batch.reload(), forecast.reload()])

  async function change(body: BatchPatch) {
    batch.data.value = await api.batches.change(
      { params: params(), body },
      { version: batch.data.value?.version },
    )
    await forecast.reload()
  }

  return {
    batch,
    forecast,
    mine: computed(() => batch.data.value?.mine ?? false),
    params,
    refresh,
    change,
  }
}
