import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import type { LetterDraft } from '#shared/types/reviews'
import DeskConflict from '~/components/desk/Conflict.vue'

const mine: LetterDraft = {
  title: 'T', leaveAlone: '', saw: 'Mine.', why: 'Same.', howSure: 'sure', oneChange: '', drillTitle: '', drillSteps: '', drillDose: '', caution: '',
}

function show(other: Partial<LetterDraft>) {
  return mount(DeskConflict, {
    props: { mine, other: { version: 7, letter: { ...mine, ...other }, savedAtMs: Date.UTC(2026, 4, 12, 9, 40) }, timeZone: 'Europe/London' },
    global: { stubs: { UiButton: { template: '<button type="button"><slot /></button>' } } },
  })
}

describe('two windows with one letter', () => {
  it('shows only the parts that differ, both ways', () => {
    const wrapper = show({ saw: 'Theirs.', howSure: 'a_guess' })
    expect(wrapper.findAll('h3').map(heading => heading.text())).toEqual(['What I saw', 'How sure'])
    expect(wrapper.findAll('dd').map(text => text.text())).toEqual(['Mine.', 'Theirs.', 'I am sure of this', 'This is a guess'])
    expect(wrapper.text()).toContain('kept Tue 12 May, 10:40')
  })

  it('says that nothing is overwritten, at once and aloud', () => {
    const wrapper = show({ saw: 'Theirs.' })
    expect(wrapper.attributes('role')).toBe('alert')
    expect(wrapper.text()).toContain('Nothing is overwritten.')
  })

  it('calls an emptied part empty instead of showing nothing', () => {
    expect(show({ saw: '' }).findAll('dd')[1]?.text()).toBe('(empty)')
  })

  it('leaves the choice to the coach', async () => {
    const wrapper = show({ saw: 'Theirs.' })
    const [keep, take] = wrapper.findAll('button')
    await keep?.trigger('click')
    expect(Object.keys(wrapper.emitted())).toContain('keepMine')
    expect(Object.keys(wrapper.emitted())).not.toContain('takeOther')
    await take?.trigger('click')
    expect(wrapper.emitted('takeOther')).toHaveLength(1)
  })
})
