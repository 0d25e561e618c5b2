import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import { createSSRApp } from 'vue'
import { renderToString } from 'vue/server-renderer'
import AccountTimeZone from '~/components/account/TimeZone.vue'
import UiSelect from '~/components/ui/Select.vue'

function show(modelValue: string) {
  return mount(AccountTimeZone, { props: { modelValue }, global: { components: { UiSelect } } })
}

describe('choosing a time zone', () => {
  it('begins with the zone of the device when none is known', () => {
    expect(show('').emitted('update:modelValue')).toEqual([[new Intl.DateTimeFormat().resolvedOptions().timeZone]])
  })

  it('leaves a known zone alone and offers the others', async () => {
    const wrapper = show('Europe/London')
    await wrapper.vm.$nextTick()
    expect(wrapper.emitted('update:modelValue')).toBeUndefined()
    expect(wrapper.get('select').element.value).toBe('Europe/London')
    const values = wrapper.findAll('option').map(option => option.attributes('value'))
    expect(values).toContain('America/New_York')
    expect(values).toContain('UTC')
    expect(new Set(values).size).toBe(values.length)
  })

  it('keeps a zone that the device does not list', async () => {
    const wrapper = show('Europe/Nowhere')
    await wrapper.vm.$nextTick()
    expect(wrapper.get('select').element.value).toBe('Europe/Nowhere')
  })

  it('is drawn by the server without the list of its own machine', async () => {
    const page = await renderToString(createSSRApp(AccountTimeZone, { modelValue: 'Europe/London' }).component('UiSelect', UiSelect))
    expect(page.match(/<option/g)).toHaveLength(1)
    expect(page).toContain('Europe/London')
  })
})
