import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import FilmStandOutline from '~/components/film/StandOutline.vue'

const feet = [{ heel: { x: 0.3, y: 0.8 }, toe: { x: 0.5, y: 0.8 } }, { heel: { x: 0.3, y: 0.9 }, toe: { x: 0.5, y: 0.9 } }]
const show = (props: Partial<InstanceType<typeof FilmStandOutline>['$props']> = {}) =>
  mount(FilmStandOutline, { props: { feet, ball: { x: 0.75, y: 0.85 }, widthPx: 1080, heightPx: 1920, ...props } })
const numbersOf = (path: string | undefined) => (path?.match(/-?\d+(?:\.\d+)?/g) ?? []).map(Number)

describe('outline of the last film', () => {
  it('puts the ball where it was, in the frame\'s own proportions', () => {
    const wrapper = show()
    // 1080 / 1920 of 1000 is 562.5; three quarters of it 421.875.
    expect(wrapper.find('svg').attributes('viewBox')).toBe('0 0 562.5 1000')
    expect(Number(wrapper.find('circle').attributes('cx'))).toBeCloseTo(421.875, 6)
    expect(Number(wrapper.find('circle').attributes('cy'))).toBeCloseTo(850, 6)
  })

  it('draws each shoe along its heel and toe', () => {
    const shoes = show().findAll('g')[1]?.findAll('path').map(path => numbersOf(path.attributes('d'))) ?? []
    // Heel at 0.3 · 562.5 = 168.75, toe at 281.25: half as wide as 0.2 · 112.5 = 22.5 above and below.
    expect(shoes[0]?.slice(0, 4)).toEqual([168.8, 822.5, 281.3, 822.5])
    expect(shoes[1]?.slice(0, 4)).toEqual([168.8, 922.5, 281.3, 922.5])
  })

  it('still shows a foot that points at the camera', () => {
    const path = show({ feet: [{ heel: { x: 0.4, y: 0.8 }, toe: { x: 0.4, y: 0.8 } }] }).find('path').attributes('d')
    expect(path).not.toContain('NaN')
    expect(numbersOf(path)[1]).toBe(812)
  })

  it('draws everything twice, dark under pale, so that it shows on any picture', () => {
    const [casing, line] = show().findAll('g')
    expect(casing?.classes()).toContain('stroke-night')
    expect(line?.classes()).toContain('stroke-chalk')
    expect(Number(casing?.attributes('stroke-width'))).toBeGreaterThan(Number(line?.attributes('stroke-width')))
  })

  it('lets the picture be touched, does without a ball, and says what it is', () => {
    expect(show().find('svg').classes()).toContain('pointer-events-none')
    expect(show({ ball: undefined }).find('circle').exists()).toBe(false)
    expect(show().find('svg').attributes('aria-label')).toContain('in the last film')
  })
})
