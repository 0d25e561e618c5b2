import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import type { SpanS } from '~/film/prepare/clip-facts'
import SwingLine from '~/components/submit/SwingLine.vue'

function show(swings: SpanS[] = [[1, 3], [4, 6]], disabled = false) {
  return mount(SwingLine, { props: { swings, range: [0, 10], disabled } })
}

describe('the line of swings', () => {
  it('has a slider at each end of each bracket', () => {
    const sliders = show().findAll('[role="slider"]')
    expect(sliders.map(slider => slider.attributes('aria-label'))).toEqual(['Swing 1, begin', 'Swing 1, end', 'Swing 2, begin', 'Swing 2, end'])
    expect(sliders[1]?.attributes()).toMatchObject({ 'aria-valuemin': '1.3', 'aria-valuemax': '4', 'aria-valuenow': '3', 'aria-valuetext': '3.00 s' })
  })

  it.each([['ArrowLeft', 2.95], ['ArrowRight', 3.05], ['PageUp', 3.5], ['PageDown', 2.5], ['Home', 1.3], ['End', 4]])('moves an end with %s', async (key, toS) => {
    const wrapper = show()
    await wrapper.findAll('[role="slider"]')[1]?.trigger('keydown', { key })
    const moved = wrapper.emitted<[SpanS[]]>('change')?.[0]?.[0]
    expect(moved?.[0]?.[1]).toBeCloseTo(toS, 9)
    expect(moved?.[1]).toEqual([4, 6])
    expect(wrapper.emitted<[number]>('look')?.at(-1)?.[0]).toBeCloseTo(toS, 9)
  })

  it('takes a swing away, but not the last', async () => {
    const wrapper = show()
    await wrapper.find('button[aria-label="Take swing 1 away"]').trigger('click')
    expect(wrapper.emitted('change')).toEqual([[[[4, 6]]]])
    expect(show([[1, 3]]).find('button[aria-label="Take swing 1 away"]').attributes('disabled')).toBeDefined()
  })

  it('adds one where there is room', async () => {
    const wrapper = show([[0, 2]])
    await wrapper.findAll('button').find(button => button.text() === 'Add a swing')?.trigger('click')
    expect(wrapper.emitted('change')).toEqual([[[[0, 2], [4.5, 7.5]]]])
    expect(show([[0, 10]]).text()).not.toContain('Add a swing')
  })

  it('stands still while the clip is being made', async () => {
    const wrapper = show(undefined, true)
    await wrapper.findAll('[role="slider"]')[1]?.trigger('keydown', { key: 'End' })
    expect(wrapper.emitted('change')).toBeUndefined()
  })
})
