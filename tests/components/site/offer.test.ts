import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import type { OfferView } from '#shared/types/offers'
import SiteOffer from '~/components/site/Offer.vue'

const single: OfferView = {
  id: 'o1', name: 'One review', kind: 'single', reviewCount: 1, priceMinor: 4500, currency: 'GBP', turnaroundMs: 9 * 3_600_000, followUpsIncluded: 2,
}

function words(offer: OfferView): string {
  return mount(SiteOffer, { props: { offer } }).text().replace(/\s+/g, ' ')
}

describe('an offer on the public page', () => {
  it('tells price, promise and what is included', () => {
    expect(words(single)).toBe('One review£45for one review Answered within 9 h of working time Included with each 2 follow-up questions')
  })

  it('tells what each review of a series costs', () => {
    expect(words({ ...single, kind: 'series', reviewCount: 5, priceMinor: 19_500 })).toContain('£195for 5 reviews, £39 each')
  })

  it('says "about" when the price does not divide', () => {
    // 100.00 by 3 is 33.33 and a third.
    expect(words({ ...single, kind: 'series', reviewCount: 3, priceMinor: 10_000 })).toContain('about £33.33 each')
  })

  it('counts follow-up questions in words', () => {
    expect(words({ ...single, followUpsIncluded: 1 })).toContain('One follow-up question')
    expect(words({ ...single, followUpsIncluded: 0 })).toContain('No follow-up questions')
  })
})
