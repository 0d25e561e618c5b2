import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import type { QueueRow } from '#shared/types/reviews'
import DeskQueueList from '~/components/desk/QueueList.vue'
import UiTag from '~/components/ui/Tag.vue'

const HOUR_MS = 3_600_000
// Tue 12 May 2026, 10:40 in London.
const NOW_MS = Date.UTC(2026, 4, 12, 9, 40)
const at = (hours: number) => NOW_MS + hours * HOUR_MS

const row: QueueRow = {
  reviewId: 'r1', turnaroundId: 't1', kind: 'answer', state: 'waiting', studentName: 'Joel O.', isJunior: false,
  title: 'Heavy and thin in the same round', club: '7-iron', coachId: null, coachName: null, isMine: false, views: ['face_on', 'down_the_line'],
  startedAtMs: at(-24), promisedAtMs: at(3.5), timeInHandMs: 3.5 * HOUR_MS,
  spans: [
    { kind: 'worked', fromMs: at(-24), toMs: at(-17) },
    { kind: 'paused', fromMs: at(-17), toMs: at(-16) },
    { kind: 'off', fromMs: at(-16), toMs: at(-1.5) },
    { kind: 'worked', fromMs: at(-1.5), toMs: at(0) },
    { kind: 'left', fromMs: at(0), toMs: at(3.5) },
  ],
}

function show(rows: QueueRow[]) {
  return mount(DeskQueueList, {
    props: { rows, nowMs: NOW_MS, timeZone: 'Europe/London' },
    global: { components: { UiTag }, stubs: { NuxtLink: { props: ['to'], template: '<a :href="to"><slot /></a>' } } },
  })
}

const parts = (wrapper: ReturnType<typeof show>, kind: string) => wrapper.findAll(`[data-kind="${kind}"]`)
const percent = (value: string | undefined) => Number(value?.replace('%', ''))

describe('the queue', () => {
  it('opens the bench from each row', () => {
    expect(show([row]).find('li a').attributes('href')).toBe('/desk/r1')
  })

  it('draws worked, thin, hatched and remaining time, the promise and now', () => {
    const wrapper = show([row])
    expect(parts(wrapper, 'worked')).toHaveLength(2)
    expect(parts(wrapper, 'off')[0]?.attributes('height')).toBe('2')
    expect(parts(wrapper, 'paused')[0]?.attributes('fill')).toMatch(/^url\(#/)
    expect(parts(wrapper, 'left')).toHaveLength(1)
    expect(percent(parts(wrapper, 'left')[0]?.attributes('x'))).toBeCloseTo(percent(parts(wrapper, 'now')[0]?.attributes('x1')), 2)
    expect(percent(parts(wrapper, 'promise')[0]?.attributes('x'))).toBeCloseTo(98, 1)
  })

  it('sets now at the same place in every row', () => {
    const wrapper = show([row, { ...row, reviewId: 'r2', turnaroundId: 't2', promisedAtMs: at(30), spans: [{ kind: 'left', fromMs: at(0), toMs: at(30) }] }])
    const places = parts(wrapper, 'now').map(line => line.attributes('x1'))
    expect(places).toHaveLength(2)
    expect(new Set(places).size).toBe(1)
  })

  it('says the line in words for those who cannot see it', () => {
    expect(show([row]).text()).toContain('Started Mon 11 May, 10:40, the clock stood still for 1 h while new film was awaited, promised by Tue 12 May, 14:10')
  })

  it('shows the time in hand, and soon in a word as well as a colour', () => {
    expect(show([row]).text()).toContain('3 h 30')
    const soon = show([{ ...row, timeInHandMs: 1.75 * HOUR_MS }])
    expect(soon.text()).toContain('1 h 45, soon')
    expect(soon.find('.text-amber').exists()).toBe(true)
  })

  it('draws what is late beyond the promise and says how late', () => {
    const late = show([{ ...row, promisedAtMs: at(-0.5), timeInHandMs: -0.5 * HOUR_MS, spans: [{ kind: 'worked', fromMs: at(-24), toMs: at(-0.5) }] }])
    expect(late.text()).toContain('30 min late')
    expect(percent(parts(late, 'late')[0]?.attributes('width'))).toBeGreaterThan(0)
    expect(parts(show([row]), 'late')).toHaveLength(0)
  })

  it('neither hurries nor accuses while the clock stands still', () => {
    const paused = show([{ ...row, state: 'new_film', promisedAtMs: at(-0.5), timeInHandMs: 6 * HOUR_MS, spans: [{ kind: 'paused', fromMs: at(-24), toMs: at(-0.5) }] }])
    expect(paused.text()).toContain('clock stands still')
    expect(paused.text()).not.toContain('late')
    expect(parts(paused, 'late')).toHaveLength(0)
    expect(parts(paused, 'promise')).toHaveLength(0)
    expect(parts(paused, 'paused')).toHaveLength(2)
  })

  it('says who has a row in hand', () => {
    expect(show([{ ...row, state: 'in_hand', coachName: 'Anders Holm' }]).text()).toContain('Anders Holm has it')
    expect(show([{ ...row, state: 'in_hand', isMine: true, coachName: 'Mara' }]).text()).toContain('in your hand')
    expect(show([{ ...row, isJunior: true }]).text()).toContain('junior, guardian copied')
  })
})
