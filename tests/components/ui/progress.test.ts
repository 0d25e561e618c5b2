// @vitest-environment happy-dom
import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import UiProgress from '~/components/ui/Progress.vue'

describe('UiProgress', () => {
  it.each([[0, '0'], [0.644, '64'], [1, '100'], [1.2, '100'], [-1, '0'], [Number.NaN, '0']])('shows %s as %s percent', (value, percent) => {
    const bar = mount(UiProgress, { props: { value, label: 'Sending' } }).get('[role=progressbar]')
    expect(bar.attributes('aria-valuenow')).toBe(percent)
    expect(bar.attributes('aria-label')).toBe('Sending')
  })

  it('speaks at quarters only', async () => {
    const wrapper = mount(UiProgress, { props: { value: 0.1, label: 'Sending' } })
    const heard = new Set<string>()
    for (let percent = 10; percent <= 100; percent += 1) {
      await wrapper.setProps({ value: percent / 100 })
      heard.add(wrapper.get('[aria-live=polite]').text())
    }
    expect([...heard]).toEqual(['', 'Sending: 25 percent', 'Sending: 50 percent', 'Sending: 75 percent', 'Sending: 100 percent'])
  })
})
