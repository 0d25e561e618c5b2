import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import type { LetterView, TurnaroundView } from '#shared/types/reviews'
import ReviewLetter from '~/components/review/Letter.vue'

// Tue 12 May 2026, 12:50 in London.
const ANSWERED_AT_MS = Date.UTC(2026, 4, 12, 11, 50)

const letter: LetterView = {
  title: 'Why the heavy ones come in twos',
  leaveAlone: 'Joel, your set-up and the top of your swing are in good order.',
  saw: 'The end of your grip hangs **24 cm** behind the ball.',
  why: 'Your hands slow down before the ball.',
  howSure: 'fairly_sure',
  oneChange: 'Keep the grip end travelling past the ball before the wrists let go.',
  drillTitle: 'Low punch, level to level',
  drillSteps: '1. Start with the handle ahead.\n2. Swing until the shaft is level.',
  drillDose: '4 sessions a week, 10 minutes',
  caution: 'Stop if your wrist hurts.',
  answeredAtMs: ANSWERED_AT_MS,
  coach: { id: 'c', name: 'Mara Lindqvist', hasPicture: false },
}
const turnaround: TurnaroundView = {
  kind: 'answer', status: 'stopped', startedAtMs: 0, promisedAtMs: Date.UTC(2026, 4, 12, 13), stoppedAtMs: ANSWERED_AT_MS, timeInHandMs: null, isLate: false,
}

function show(change: Partial<LetterView> = {}, clock: TurnaroundView | null = turnaround, timeZone = 'Europe/London') {
  return mount(ReviewLetter, {
    props: {
      review: { number: 4, club: '7-iron', title: 'Heavy and thin in the same round', turnaround: clock },
      letter: { ...letter, ...change },
      timeZone,
    },
  })
}

describe('the letter', () => {
  it('says who answered when, and by when it was promised', () => {
    expect(show().text()).toContain('Review 4 · 7-iron · Mara Lindqvist answered on Tue 12 May, 12:50, promised by 14:00')
  })

  it('tells the same moment in the reader’s own zone', () => {
    expect(show({}, turnaround, 'America/New_York').text()).toContain('answered on Tue 12 May, 07:50, promised by 09:00')
  })

  it('leaves the promise out where there was none', () => {
    expect(show({}, null).text()).not.toContain('promised')
  })

  it('has its parts in order under headings', () => {
    const headings = show().findAll('h1, h2').map(heading => heading.text())
    expect(headings).toEqual(['Why the heavy ones come in twos', 'What I saw', 'Why it happens', 'Low punch, level to level', 'Take care'])
  })

  it('marks the one change and nothing else', () => {
    const marked = show().findAll('.bg-marker')
    expect(marked.map(part => part.text())).toEqual(['One change: Keep the grip end travelling past the ball before the wrists let go.'])
  })

  it('says how sure the coach is', () => {
    expect(show().text()).toContain('I am fairly sure of this.')
    expect(show({ howSure: 'a_guess' }).text()).toContain('This is a guess.')
  })

  it('sets Markdown as text with lists and stress', () => {
    const wrapper = show()
    expect(wrapper.find('strong').text()).toBe('24 cm')
    expect(wrapper.findAll('ol li').map(step => step.text())).toEqual(['Start with the handle ahead.', 'Swing until the shaft is level.'])
  })

  it('runs no markup that a coach typed', () => {
    const wrapper = show({ saw: '<img src=x onerror=alert(1)> [here](javascript:alert(1))', oneChange: '<b>bold</b>' })
    expect(wrapper.find('img').exists()).toBe(false)
    expect(wrapper.find('b').exists()).toBe(false)
    expect(wrapper.html()).not.toContain('href="javascript')
    expect(wrapper.text()).toContain('<b>bold</b>')
  })

  it('carries the general caution beside the coach’s own', () => {
    const text = show().text()
    expect(text).toContain('Stop if your wrist hurts.')
    expect(text).toContain('see a physician or physiotherapist')
    expect(text).toContain('not medical advice')
  })

  it('takes the question’s title when the coach gave none, and leaves out an empty dose', () => {
    const wrapper = show({ title: '', drillDose: ' ', leaveAlone: '' })
    expect(wrapper.find('h1').text()).toBe('Heavy and thin in the same round')
    expect(wrapper.text()).toContain('Your drill')
    expect(wrapper.text()).not.toContain('Your drill ·')
  })
})
