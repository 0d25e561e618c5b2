// @vitest-environment happy-dom
import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import UiChoice from '~/components/ui/Choice.vue'

const options = [{ value: 'solid', label: 'solid' }, { value: 'fat', label: 'fat', hint: 'ground first' }]

describe('UiChoice', () => {
  it('is a named group of radio buttons, each in its own label, under one name', () => {
    const wrapper = mount(UiChoice, { props: { label: 'Swing 1', options } })
    expect(wrapper.element.tagName).toBe('FIELDSET')
    expect(wrapper.get('legend').text()).toBe('Swing 1')
    const buttons = wrapper.findAll<HTMLInputElement>('input[type=radio]')
    expect(buttons.map(button => button.element.closest('label')?.textContent?.replace(/\s+/g, ' ').trim())).toEqual(['solid', 'fat ground first'])
    const names = new Set(buttons.map(button => button.attributes('name')))
    expect(names.size).toBe(1)
    expect([...names][0]).toBeTruthy()
  })

  it('gives two groups two names, so that choosing in one leaves the other alone', () => {
    const first = mount({ components: { UiChoice }, template: '<div><UiChoice label="A" :options="options" /><UiChoice label="B" :options="options" /></div>', setup: () => ({ options }) })
    const names = new Set(first.findAll('input').map(button => button.attributes('name')))
    expect(names.size).toBe(2)
  })

  it('shows the choice and tells of another', async () => {
    const wrapper = mount(UiChoice, { props: { label: 'Swing 1', options, modelValue: 'solid' } })
    const [solid, fat] = wrapper.findAll<HTMLInputElement>('input')
    expect(solid?.element.checked).toBe(true)
    expect(fat?.element.checked).toBe(false)
    await fat?.setValue(true)
    expect(wrapper.emitted('update:modelValue')).toEqual([['fat']])
  })

  it('is described by its error', () => {
    const wrapper = mount(UiChoice, { props: { label: 'Swing 1', options, error: 'Choose one.' } })
    const id = wrapper.attributes('aria-describedby')
    expect(wrapper.get(`#${id}`).text()).toBe('Choose one.')
    expect(wrapper.findAll('input').every(button => button.attributes('aria-invalid') === 'true')).toBe(true)
  })
})
