import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import { STAND_ERROR_WORDS, STAND_ERRORS } from '#shared/domain/film/advice/standing'
import FilmStandErrors from '~/components/film/StandErrors.vue'

describe('usual errors', () => {
  it('shows each with a drawing and what to do', () => {
    const rows = mount(FilmStandErrors, { props: { handedness: 'right' } }).findAll('li')
    expect(rows).toHaveLength(STAND_ERRORS.length)
    rows.forEach((row, index) => {
      const error = STAND_ERRORS[index] ?? 'tilted'
      expect(row.text()).toContain(STAND_ERROR_WORDS[error].title)
      expect(row.text()).toContain(STAND_ERROR_WORDS[error].whatToDo)
      expect(row.findAll('svg[viewBox="0 0 160 110"] path').length).toBeGreaterThan(2)
    })
  })

  it('leaves the toe line out face-on', () => {
    const text = mount(FilmStandErrors, { props: { handedness: 'right', view: 'face_on' } }).text()
    expect(text).not.toContain('On the toe line')
    expect(mount(FilmStandErrors, { props: { handedness: 'right', view: 'down_the_line' } }).text()).toContain('On the toe line')
  })

  it('mirrors the drawings of a left-hander, not their words', () => {
    const wrapper = mount(FilmStandErrors, { props: { handedness: 'left' } })
    const mirrored = wrapper.findAll('[transform^="matrix(-1"]')
    expect(mirrored).toHaveLength(STAND_ERRORS.length)
    for (const part of mirrored) expect(part.findAll('text')).toHaveLength(0)
    expect(wrapper.findAll('svg text').map(text => text.text())).toEqual(['0.5×', 'selfie'])
  })
})
