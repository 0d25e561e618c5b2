import type { Letter } from '../layout'
import { firstNameOf, layOut } from '../layout'

export interface MoneyBackData {
  studioName: string
  readerName: string
  /** Like "£45.00". */
  amountText: string
  reason: 'paid-twice' | 'withdrawn' | 'nothing-to-pay-for'
  orderId: string
  reviewsUrl: string
}

function reasonWords(reason: MoneyBackData['reason']): string {
  if (reason === 'paid-twice') return 'The same review was paid for twice, so one payment goes back.'
  if (reason === 'withdrawn') return 'You took the review back.'
  return 'The review that this was for is no longer there.'
}

/** To whoever paid, when the provider has taken the refund. */
export function moneyBackLetter(data: MoneyBackData): Letter {
  return layOut({
    subject: `${data.amountText} goes back to your card`,
    preheader: reasonWords(data.reason),
    heading: `${data.amountText} goes back to your card`,
    blocks: [
      { kind: 'paragraph', text: `${firstNameOf(data.readerName)}, ${data.amountText} is on its way back to the card that you paid with. ${reasonWords(data.reason)} Banks take up to ten days to show it.` },
      { kind: 'facts', rows: [{ name: 'Order', value: data.orderId }] },
      { kind: 'button', label: 'Your reviews', url: data.reviewsUrl },
    ],
    studioName: data.studioName,
    why: 'You get this letter because you paid for something here.',
  })
}
