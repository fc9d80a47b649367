import { flushPromises, mount } from '@vue/test-utils'
import { afterEach, describe, expect, it } from 'vitest'
import { defineComponent, h } from 'vue'
import ConfirmDialog from '@/components/base/ConfirmDialog.vue'
import { type Question, provideConfirm, useConfirm } from '@/composables/useConfirm'

const QUESTION: Question = {
  title: 'Decline this loan?',
  text: 'Wren gets an e-mail.',
  act: 'Decline it',
  severe: true,
}

/** The app's part (dialog) and a view's part (question) as they stand to each other. */
function ask() {
  let confirm!: ReturnType<typeof useConfirm>
  const View = defineComponent({
    setup() {
      confirm = useConfirm()
      return () => h('button', { id: 'opener' }, 'Decline')
    },
  })
  const wrapper = mount(
    defineComponent({
      setup() {
        const { question, answer } = provideConfirm()
        return () => [
          h(View),
          question.value && h(ConfirmDialog, { question: question.value, onAnswered: answer }),
        ]
      },
    }),
    { attachTo: document.body },
  )
  return { wrapper, confirm }
}
const dialog = () => document.querySelector<HTMLElement>('[role="alertdialog"]')
const button = (words: string) =>
  [...document.querySelectorAll('button')].find((found) => found.textContent.trim() === words)

afterEach(() => {
  document.body.innerHTML = ''
})

describe('a confirmation', () => {
  it('is a named modal dialog with focus on the way out', async () => {
    const { confirm } = ask()
    document.getElementById('opener')?.focus()
    void confirm(QUESTION)
    await flushPromises()
    const open = dialog()
    expect(open?.getAttribute('aria-modal')).toBe('true')
    const title = document.getElementById(open?.getAttribute('aria-labelledby') ?? '')
    expect(title?.textContent.trim()).toBe('Decline this loan?')
    await flushPromises()
    expect(document.activeElement?.textContent.trim()).toBe('Leave it')
    button('Leave it')?.click()
    await flushPromises()
    expect(document.activeElement?.id).toBe('opener')
  })

  it('answers yes to its act', async () => {
    const { confirm } = ask()
    const answer = confirm(QUESTION)
    await flushPromises()
    button('Decline it')?.click()
    expect(await answer).toBe(true)
  })

  it('answers no to the way out and to the cross', async () => {
    for (const words of ['Leave it', 'Close']) {
      const { confirm, wrapper } = ask()
      const answer = confirm(QUESTION)
      await flushPromises()
      button(words)?.click()
      expect(await answer).toBe(false)
      wrapper.unmount()
    }
  })

  it('answers no to a question that another replaces', async () => {
    const { confirm } = ask()
    const first = confirm(QUESTION)
    const second = confirm({ title: 'Retire DJ-03?', act: 'Retire it' })
    expect(await first).toBe(false)
    await flushPromises()
    button('Retire it')?.click()
    expect(await second).toBe(true)
  })
})
