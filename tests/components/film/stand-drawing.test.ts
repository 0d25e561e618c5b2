import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import { STAND_STEPS } from '#shared/domain/film/advice/standing'
import FilmStandDrawing from '~/components/film/StandDrawing.vue'

type Props = InstanceType<typeof FilmStandDrawing>['$props']
const show = (props: Props) => mount(FilmStandDrawing, { props })
const VIEWS = ['face_on', 'down_the_line'] as const

/** Where a text of the drawing stands, and to which side it runs. */
function placeOf(wrapper: ReturnType<typeof show>, words: string) {
  const text = wrapper.findAll('text').find(found => found.text() === words)
  return { x: Number(text?.attributes('x')), anchor: text?.attributes('text-anchor') }
}

describe('where the phone stands', () => {
  it.each(VIEWS)('says all of the drawing in words, %s', (view) => {
    const wrapper = show({ view, handedness: 'right' })
    const labels = wrapper.findAll('svg[role="img"]').map(drawing => drawing.attributes('aria-label'))
    expect(labels).toHaveLength(2)
    expect(labels[0]).toMatch(/target to the right.*four to five big steps away.*Nobody stands/)
    expect(labels[1]).toContain('lens as high as the hands')
    expect(wrapper.findAll('ol li').map(step => step.text().replace(/^\d/, ''))).toEqual(STAND_STEPS[view])
  })

  it.each(VIEWS)('has for each numbered line the same number in the drawing, %s', (view) => {
    const wrapper = show({ view, handedness: 'right' })
    const drawn = wrapper.findAll('svg text').map(text => text.text()).filter(text => /^\d$/.test(text)).sort()
    expect(drawn).toEqual(STAND_STEPS[view].map((_, index) => String(index + 1)))
  })

  it('names the line each view needs', () => {
    expect(show({ view: 'face_on', handedness: 'right' }).find('svg').attributes('aria-label')).toContain('square to it at the ball')
    const behind = show({ view: 'down_the_line', handedness: 'right' })
    expect(behind.find('svg').attributes('aria-label')).toContain('line through the hands')
    expect(placeOf(behind, 'line through your hands').x).toBeGreaterThan(0)
  })

  it.each(VIEWS)('mirrors a left-hander, the words staying readable, %s', (view) => {
    const right = show({ view, handedness: 'right' })
    const left = show({ view, handedness: 'left' })
    expect(left.find('svg').attributes('aria-label')).toContain('target to the left')
    expect(right.findAll('[transform^="matrix(-1"]')).toHaveLength(0)
    const mirrored = left.findAll('[transform^="matrix(-1"]')
    expect(mirrored).toHaveLength(2)
    for (const part of mirrored) expect(part.findAll('text')).toHaveLength(0)
    expect(placeOf(right, 'target line').x + placeOf(left, 'target line').x).toBe(340)
    expect([placeOf(right, 'target line').anchor, placeOf(left, 'target line').anchor]).toEqual(['end', 'start'])
  })

  it('is the drawing from above alone when compact', () => {
    const wrapper = show({ view: 'face_on', handedness: 'right', compact: true })
    expect(wrapper.findAll('svg')).toHaveLength(1)
    expect(wrapper.findAll('text')).toHaveLength(0)
    expect(wrapper.find('ol').exists()).toBe(false)
    expect(wrapper.find('svg').attributes('aria-label')).toContain('four to five big steps')
  })
})
