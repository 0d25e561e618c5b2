import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import type { SwingInput } from '#shared/schemas/swings'
import SubmitBall from '~/components/submit/Ball.vue'
import SubmitFlightGrid from '~/components/submit/FlightGrid.vue'
import UiChoice from '~/components/ui/Choice.vue'

const swing: SwingInput = { fromMs: 0, toMs: 900, contact: null, flight: null, carryM: null, surface: null }

function show(change: Partial<SwingInput> = {}) {
  return mount(SubmitBall, { props: { number: 1, swing: { ...swing, ...change } }, global: { components: { SubmitFlightGrid, UiChoice } } })
}
const radios = (wrapper: ReturnType<typeof show>) => wrapper.findAll('input[type="radio"]').map(radio => radio.attributes('value') ?? radio.attributes('aria-label'))

describe('what a ball did', () => {
  it('asks first how it was struck', async () => {
    const wrapper = show()
    expect(radios(wrapper)).toEqual(['solid', 'fat', 'thin', 'other'])
    await wrapper.find('input[value="fat"]').setValue(true)
    expect(wrapper.emitted('change')).toEqual([[{ contact: 'fat' }]])
  })

  it('then how it flew, in one more tap', async () => {
    const wrapper = show({ contact: 'fat' })
    const flight = wrapper.find('input[aria-label="Started left, curved right"]')
    await flight.setValue(true)
    expect(wrapper.emitted('change')).toEqual([[{ flight: { start: 'left', curve: 'right', height: 'normal' } }]])
  })

  it('names the other contacts when asked', async () => {
    const wrapper = show()
    await wrapper.find('input[value="other"]').setValue(true)
    expect(wrapper.emitted('change')).toBeUndefined()
    expect(radios(wrapper)).toContain('shank')
  })

  it('asks for no flight of a ball that was missed, and forgets one', async () => {
    const wrapper = show({ contact: 'shank', flight: { start: 'right', curve: 'right', height: 'low' } })
    expect(wrapper.text()).toContain('Started right, curved right, low.')
    await wrapper.find('input[value="missed"]').setValue(true)
    expect(wrapper.emitted('change')).toEqual([[{ contact: 'missed', flight: null }]])
    expect(show({ contact: 'missed' }).text()).not.toContain('How it flew')
  })
})
