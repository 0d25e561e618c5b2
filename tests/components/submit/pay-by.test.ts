import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import type { OfferView } from '#shared/types/offers'
import PayBy from '~/components/submit/PayBy.vue'

const single: OfferView = { id: 'o1', name: 'One review', kind: 'single', reviewCount: 1, priceMinor: 4500, currency: 'GBP', turnaroundMs: 32_400_000, followUpsIncluded: 2 }
const series: OfferView = { ...single, id: 'o2', name: 'Five reviews', kind: 'series', reviewCount: 5, priceMinor: 19_500 }

function show(creditsLeft: number, offers = [single, series]) {
  return mount(PayBy, { props: { offers, creditsLeft, chosen: creditsLeft > 0 ? 'credit' : 'o1' } })
}

describe('how a review is paid', () => {
  it('offers what is there already first', () => {
    const names = show(2).findAll('label b').map(name => name.text())
    expect(names).toEqual(['Use one of your 2 reviews', 'Pay £45 by card', 'Buy five for £195, £39 each'])
  })

  it('does not offer what is used up', () => {
    expect(show(0).findAll('label b').map(name => name.text())).toEqual(['Pay £45 by card', 'Buy five for £195, £39 each'])
  })

  it('says about where a price does not divide', () => {
    expect(show(0, [{ ...series, priceMinor: 19_999 }]).text()).toContain('about £40 each')
  })

  it('tells what was chosen', async () => {
    const wrapper = show(1)
    await wrapper.find('input[value="o2"]').setValue(true)
    expect(wrapper.emitted('choose')).toEqual([['o2']])
  })
})
