import { flushPromises } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import { effectScope, nextTick, ref } from 'vue'
import { useRequest } from '@/composables/useRequest'

/** A question whose answers the test gives, in any order. */
function asked<T>() {
  const open: { resolve: (value: T) => void; reject: (reason: unknown) => void; signal: AbortSignal }[] = []
  const load = (signal: AbortSignal) =>
    new Promise<T>((resolve, reject) => open.push({ resolve, reject, signal }))
  const at = (index: number) => {
    const one = open[index]
    if (!one) throw new Error(`question ${index} was never asked`)
    return one
  }
  return { load, at, count: () => open.length }
}

describe('useRequest', () => {
  it('waits, then is full, or empty when nothing came', async () => {
    const { load, at } = asked<{ items: string[] }>()
    const { state, data, reload } = useRequest(load)
    expect(state.value).toBe('waiting')
    at(0).resolve({ items: ['DJ-07'] })
    await flushPromises()
    expect([state.value, data.value]).toEqual(['full', { items: ['DJ-07'] }])
    void reload()
    at(1).resolve({ items: [] })
    await flushPromises()
    expect(state.value).toBe('empty')
  })

  it('drops the answer to an earlier question, and calls it off', async () => {
    const which = ref('a')
    const { load, at } = asked<string>()
    const { data } = useRequest(load, { watch: which })
    which.value = 'b'
    await nextTick()
    expect(at(0).signal.aborted).toBe(true)
    at(1).resolve('answer to b')
    await flushPromises()
    at(0).resolve('answer to a')
    await flushPromises()
    expect(data.value).toBe('answer to b')
  })

  it('ignores the failure of an earlier question as well', async () => {
    const { load, at } = asked<string>()
    const { state, reload } = useRequest(load)
    void reload()
    at(0).reject(new Error('late'))
    at(1).resolve('fine')
    await flushPromises()
    expect(state.value).toBe('full')
  })

  it('fails, and is full again after a retry', async () => {
    const { load, at } = asked<string>()
    const { state, error, reload } = useRequest(load)
    at(0).reject(new Error('broken'))
    await flushPromises()
    expect([state.value, (error.value as Error).message]).toEqual(['failed', 'broken'])
    void reload()
    at(1).resolve('back')
    await flushPromises()
    expect([state.value, error.value]).toEqual(['full', undefined])
  })

  it('keeps the old answer in sight while it asks again', async () => {
    const { load, at } = asked<string>()
    const { state, refreshing, data, reload } = useRequest(load)
    at(0).resolve('old')
    await flushPromises()
    void reload()
    expect([state.value, refreshing.value, data.value]).toEqual(['full', true, 'old'])
    at(1).resolve('new')
    await flushPromises()
    expect([refreshing.value, data.value]).toEqual([false, 'new'])
  })

  it('calls off what is running when its page goes away', () => {
    const { load, at } = asked<string>()
    const scope = effectScope()
    scope.run(() => useRequest(load))
    scope.stop()
    expect(at(0).signal.aborted).toBe(true)
  })
})
