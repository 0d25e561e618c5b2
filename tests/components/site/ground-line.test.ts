import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import SiteGroundLine from '~/components/site/GroundLine.vue'

function draw(valueCm: number) {
  return mount(SiteGroundLine, { props: { valueCm, uncertaintyCm: 5, aimFromCm: 2, aimToCm: 12, label: 'Low point behind the ball.' } })
}

describe('the ground line', () => {
  it('is told in words to those who do not see it', () => {
    const line = draw(-6)
    expect(line.attributes('role')).toBe('img')
    expect(line.attributes('aria-label')).toBe('Low point behind the ball.')
  })

  it('puts a value behind the ball to its left, on the same scale as the ticks', () => {
    const line = draw(-10)
    const dotX = Number(line.get('circle.fill-mark').attributes('cx'))
    const ballX = Number(line.get('circle.fill-sheet').attributes('cx'))
    const tick = line.findAll('text').find(text => text.text() === '−10')
    expect(dotX).toBeLessThan(ballX)
    expect(dotX).toBe(Number(tick?.attributes('x')))
  })

  it('writes the sign as a minus and the uncertainty beside the value', () => {
    expect(draw(-6).text()).toContain('−6 ± 5 cm')
    expect(draw(6).text()).toContain('+6 ± 5 cm')
  })
})
