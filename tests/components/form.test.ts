import { flushPromises, mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import { defineComponent, h } from 'vue'
import { z } from 'zod'
import ErrorSummary from '@/components/base/ErrorSummary.vue'
import FieldFrame from '@/components/base/FieldFrame.vue'
import NumberField from '@/components/base/NumberField.vue'
import TextField from '@/components/base/TextField.vue'
import { readNumber } from '@/components/base/number-text'
import { useForm } from '@/composables/useForm'
import { ApiError } from '@/api/client'

const rule = z.object({
  name: z.string('Give it a name.'),
  lines: z.array(z.object({ grams: z.number().max(100, 'No more than 100.') })),
})

/** `useForm` inside a component, as it is used. */
function form() {
  let made!: ReturnType<typeof useForm<typeof rule, { name: string; lines: { grams: number }[] }>>
  mount(
    defineComponent({
      setup() {
        made = useForm(rule, { name: '', lines: [{ grams: 500 }] })
        return () => h('form')
      },
    }),
  )
  return made
}

describe('a field', () => {
  it('ties label, hint and message to its control', () => {
    const wrapper = mount(FieldFrame, {
      props: { id: 'x', label: 'Volume', hint: 'In litres.', error: 'Write a number.' },
      slots: { default: ({ tie }: { tie: object }) => h('input', tie) },
    })
    const input = wrapper.get('input')
    expect(wrapper.get('label').attributes('for')).toBe('x')
    expect(input.attributes()).toMatchObject({
      id: 'x',
      'aria-invalid': 'true',
      'aria-describedby': 'x-hint x-error',
    })
    expect(wrapper.get('#x-hint').text()).toBe('In litres.')
    expect(wrapper.get('#x-error').text()).toBe('Write a number.')
  })

  it('carries no message and no fault while all is well', () => {
    const wrapper = mount(TextField, { props: { label: 'Name', modelValue: '' } })
    const input = wrapper.get('input')
    expect(input.attributes('aria-invalid')).toBeUndefined()
    expect(input.attributes('aria-describedby')).toBeUndefined()
    expect(wrapper.get('label').attributes('for')).toBe(input.attributes('id'))
  })

  it('names a group by its legend', () => {
    const wrapper = mount(FieldFrame, { props: { label: 'How is it?', group: true } })
    expect(wrapper.get('legend').text()).toBe('How is it?')
    expect(wrapper.find('fieldset > legend:first-child').exists()).toBe(true)
  })

  it.each([
    ['4,5', 4.5],
    ['4.5', 4.5],
    [' 1 200 ', 1200],
    ['−2', -2],
    ['1.082', 1.082],
    ['', undefined],
  ])('reads %j as %s', (text, number) => {
    expect(readNumber(text)).toBe(number)
  })
  it.each(['1,2,3', '4.5 L', '1e3', '-', '.'])('takes %j for no number', (text) => {
    expect(readNumber(text)).toBeNaN()
  })

  it('takes a comma or a point and keeps what is being typed', async () => {
    const wrapper = mount(NumberField, {
      props: {
        label: 'Gravity',
        decimals: 3,
        modelValue: undefined as number | undefined,
        'onUpdate:modelValue': (modelValue: number | undefined) => void wrapper.setProps({ modelValue }),
      },
    })
    const input = wrapper.get('input')
    await input.setValue('1,08')
    expect(wrapper.props('modelValue')).toBe(1.08)
    expect(input.element.value).toBe('1,08')
    await input.trigger('blur')
    expect(input.element.value).toBe('1.080')
  })
})

describe('useForm', () => {
  it('checks on submit, puts each message at its path and keeps what was typed', async () => {
    const { submit, errors, field, values } = form()
    let sent = 0
    expect(await submit(() => Promise.resolve((sent += 1)))).toBe(false)
    expect(sent).toBe(0)
    expect(errors.value.map(({ path, message }) => [path, message])).toEqual([
      ['name', 'Give it a name.'],
      ['lines.0.grams', 'No more than 100.'],
    ])
    expect(field('lines.0.grams').error).toBe('No more than 100.')
    expect(values.lines[0]?.grams).toBe(500)
  })

  it('lands what the server refuses beside the same fields', async () => {
    const { submit, values, field, tries } = form()
    values.name = 'Hedgerow'
    values.lines = []
    const refused = new ApiError(400, 'invalid', 'Something is not right.', {
      errors: [{ path: 'name', message: 'You have one of that name.' }],
    })
    expect(await submit(() => Promise.reject(refused))).toBe(false)
    expect(field('name').error).toBe('You have one of that name.')
    expect(values.name).toBe('Hedgerow')
    expect(tries.value).toBe(1)
  })

  it('keeps a refusal that is about no field as the form’s own', async () => {
    const { submit, values, formError, errors } = form()
    values.name = 'Hedgerow'
    values.lines = []
    await submit(() => Promise.reject(new ApiError(409, 'not-available', 'None is free then.')))
    expect(formError.value).toBe('None is free then.')
    expect(await submit(() => Promise.resolve())).toBe(true)
    expect(errors.value).toEqual([])
  })

  it('says of an empty text what the rule says of it, and leaves an empty optional out', async () => {
    const strict = z.object({
      email: z.string().trim().min(1, 'Write your e-mail address.'),
      note: z.string().min(1).optional(),
    })
    let made!: ReturnType<typeof useForm<typeof strict, { email: string; note: string }>>
    mount({
      setup() {
        made = useForm(strict, { email: '', note: '' })
        return () => h('form')
      },
    })
    await made.submit(() => Promise.resolve())
    expect(made.errors.value.map(({ path, message }) => [path, message])).toEqual([
      ['email', 'Write your e-mail address.'],
    ])
    made.values.email = 'wren'
    let body: unknown
    await made.submit((sent) => Promise.resolve((body = sent)))
    expect(body).toEqual({ email: 'wren' })
  })

  it('sends once, however often it is pressed', async () => {
    const { submit, values } = form()
    values.name = 'Hedgerow'
    values.lines = []
    let sent = 0
    const slow = async () => {
      sent += 1
      await flushPromises()
    }
    const [first, second] = await Promise.all([submit(slow), submit(slow)])
    expect([first, second, sent]).toEqual([true, false, 1])
  })
})

describe('the summary of errors', () => {
  it('takes focus after each failed try, names the field and leads to it', async () => {
    document.body.innerHTML = '<label for="f-name">Name of the batch</label><input id="f-name">'
    const wrapper = mount(ErrorSummary, { attachTo: document.body, props: { errors: [], tries: 0 } })
    await wrapper.setProps({ errors: [{ path: 'name', message: 'Give it a name.', id: 'f-name' }], tries: 1 })
    await flushPromises()
    expect(document.activeElement).toBe(wrapper.get('[role="alert"]').element)
    expect(wrapper.get('a').text()).toBe('Name of the batch: Give it a name.')
    await wrapper.get('a').trigger('click')
    expect(document.activeElement?.id).toBe('f-name')
  })
})
