// @vitest-environment happy-dom
import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import { createSSRApp, h, nextTick, ref } from 'vue'
import { renderToString } from 'vue/server-renderer'
import UiField from '~/components/ui/Field.vue'
import UiInput from '~/components/ui/Input.vue'
import UiPassword from '~/components/ui/Password.vue'
import UiSelect from '~/components/ui/Select.vue'
import UiTextarea from '~/components/ui/Textarea.vue'

/** The texts that a screen reader reads after the name of a field. */
function describedTexts(root: Element, field: Element): string[] {
  const ids = field.getAttribute('aria-describedby')?.split(' ') ?? []
  return ids.map(id => root.querySelector(`#${id}`)?.textContent?.trim() ?? `nothing has the id ${id}`)
}

describe('UiField', () => {
  it('gives its slot an id that the label names, and no description when there is none', () => {
    const wrapper = mount(UiField, {
      props: { label: 'Club' },
      slots: { default: ({ id, describedBy, invalid }: { id: string, describedBy?: string, invalid: boolean }) => h('input', { id, 'aria-describedby': describedBy, 'data-invalid': String(invalid) }) },
    })
    const input = wrapper.get('input')
    expect(wrapper.get('label').attributes('for')).toBe(input.attributes('id'))
    expect(input.attributes('aria-describedby')).toBeUndefined()
    expect(input.attributes('data-invalid')).toBe('false')
  })

  it('takes an id from outside', () => {
    const wrapper = mount(UiField, { props: { label: 'Club', id: 'club' } })
    expect(wrapper.get('label').attributes('for')).toBe('club')
  })

  it('says in the label that a field may stay empty', () => {
    expect(mount(UiField, { props: { label: 'Misses', optional: true } }).get('label').text()).toContain('(optional)')
  })

  it('gives two fields of one page two ids', () => {
    const wrapper = mount({ render: () => [h(UiInput, { label: 'A' }), h(UiInput, { label: 'B' })] })
    const ids = wrapper.findAll('input').map(input => input.attributes('id'))
    expect(new Set(ids).size).toBe(2)
  })
})

describe.each([
  ['UiInput', UiInput, 'input'],
  ['UiTextarea', UiTextarea, 'textarea'],
  ['UiPassword', UiPassword, 'input'],
] as const)('%s', (_name, component, selector) => {
  it('is named by its label and described by hint and error, in that order', () => {
    const wrapper = mount(component, { props: { label: 'Words', hint: 'At least ten.', error: 'Too few.' } })
    const field = wrapper.get(selector)
    expect(wrapper.get('label').attributes('for')).toBe(field.attributes('id'))
    expect(describedTexts(wrapper.element, field.element)).toEqual(['At least ten.', 'Too few.'])
    expect(field.attributes('aria-invalid')).toBe('true')
  })

  it('is not invalid without an error', () => {
    expect(mount(component, { props: { label: 'Words' } }).get(selector).attributes('aria-invalid')).toBeUndefined()
  })

  it('passes on what is typed and shows what it is given', async () => {
    const wrapper = mount(component, { props: { label: 'Words', modelValue: 'old' } })
    const field = wrapper.get<HTMLInputElement | HTMLTextAreaElement>(selector)
    expect(field.element.value).toBe('old')
    await field.setValue('new')
    expect(wrapper.emitted('update:modelValue')).toEqual([['new']])
  })

  it('keeps what was typed before the page came alive', async () => {
    const text = ref('')
    const page = { render: () => h(component, { 'label': 'Words', 'modelValue': text.value, 'onUpdate:modelValue': (value: string) => text.value = value }) }
    const host = document.createElement('div')
    host.innerHTML = await renderToString(createSSRApp(page))
    document.body.append(host)
    const field = host.querySelector<HTMLInputElement | HTMLTextAreaElement>(selector)
    if (!field) throw new Error('The server drew no field.')
    field.value = 'typed early'
    createSSRApp(page).mount(host)
    await nextTick()
    expect(text.value).toBe('typed early')
    expect(field.isConnected).toBe(true)
    expect(field.value).toBe('typed early')
    host.remove()
  })
})

describe('UiInput', () => {
  it('gives foreign attributes to the field and the class to the whole', () => {
    const wrapper = mount(UiInput, { props: { label: 'Day', type: 'date' }, attrs: { min: '1900-01-01', class: 'wide' } })
    expect(wrapper.get('input').attributes('min')).toBe('1900-01-01')
    expect(wrapper.get('input').classes()).not.toContain('wide')
    expect(wrapper.classes()).toContain('wide')
  })
})

describe('UiPassword', () => {
  it('shows and hides what is typed', async () => {
    const wrapper = mount(UiPassword, { props: { label: 'Password' } })
    const button = wrapper.get('button')
    expect(wrapper.get('input').attributes('type')).toBe('password')
    await button.trigger('click')
    expect(wrapper.get('input').attributes('type')).toBe('text')
    expect(button.attributes('aria-pressed')).toBe('true')
    await button.trigger('click')
    expect(wrapper.get('input').attributes('type')).toBe('password')
  })
})

describe('UiSelect', () => {
  const options = [{ value: 'a', label: 'First' }, { value: 'b', label: 'Second' }]

  it('shows the chosen option and tells of another', async () => {
    const wrapper = mount(UiSelect, { props: { label: 'Coach', options, modelValue: 'b', error: 'Choose again.' } })
    const list = wrapper.get('select')
    expect(list.element.value).toBe('b')
    expect(describedTexts(wrapper.element, list.element)).toEqual(['Choose again.'])
    await list.setValue('a')
    expect(wrapper.emitted('update:modelValue')).toEqual([['a']])
  })
})
