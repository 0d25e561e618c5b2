import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import { adviseOnFilm } from '#shared/domain/film/advice/advise'
import type { Advice } from '#shared/domain/film/advice/context'
import FilmAdvice from '~/components/film/Advice.vue'

const advice: Advice[] = [
  { key: 'landscape', tone: 'improve', words: 'The picture is wider than it is high, so you are small in it.', whatToDo: 'Stand the phone upright and film again, or send it as it is.' },
  { key: 'slow-motion', tone: 'ask', words: 'The file does not say whether this is slow motion.', whatToDo: 'Say at how many frames a second it was filmed.' },
  { key: 'head-travel', tone: 'good', words: 'The club head moves about 14 cm between frames: fine for impact.' },
]

describe('advice on a clip', () => {
  it('lists what is and what to do, in the order given', () => {
    const rows = mount(FilmAdvice, { props: { advice } }).findAll('li')
    expect(rows.map(row => row.attributes('data-tone'))).toEqual(['improve', 'ask', 'good'])
    expect(rows[0]?.text()).toContain('wider than it is high')
    expect(rows[0]?.text()).toContain('or send it as it is.')
    expect(rows[2]?.text()).toContain('about 14 cm between frames')
    expect(rows[2]?.findAll('.text-soft')).toHaveLength(0)
  })

  it('tells the tones apart without colour and without the drawn signs', () => {
    const rows = mount(FilmAdvice, { props: { advice } }).findAll('li')
    expect(rows.map(row => row.find('.sr-only').text())).toEqual(['Could be better:', 'Question:', 'Good:'])
    expect(new Set(rows.map(row => row.find('svg').classes().join(' '))).size).toBe(3)
    for (const row of rows) expect(row.find('svg').attributes('aria-hidden')).toBe('true')
  })

  it('has a name, and nothing to show for no advice', () => {
    expect(mount(FilmAdvice, { props: { advice } }).find('ul').attributes('aria-label')).toBe('Advice on this clip')
    expect(mount(FilmAdvice, { props: { advice: [] } }).find('ul').exists()).toBe(false)
  })

  it('shows what the domain says', () => {
    const film = { framesPerSecond: 30, captureFramesPerSecond: undefined, widthPx: 1080, heightPx: 1920, durationMs: 3100 }
    const wrapper = mount(FilmAdvice, { props: { advice: adviseOnFilm(film, { view: 'face_on', club: 'driver', handedness: 'left' }) } })
    expect(wrapper.text()).toContain('Your face-on clip is 30 frames a second. The club head moves 1.3 m between frames, so impact may not be visible.')
  })
})
