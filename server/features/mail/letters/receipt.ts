import type { Letter } from '../layout'
import { firstNameOf, layOut } from '../layout'

export interface ReceiptData {
  studioName: string
  readerName: string
  offerName: string
  /** Like "£45.00". */
  amountText: string
  /** Like "Thu 21 May, 17:00", in the reader's zone. */
  paidText: string
  /** Our own number of the order. */
  orderId: string
  reviewsUrl: string
}

/** To whoever paid, once the provider says that the money is there. */
export function receiptLetter(data: ReceiptData): Letter {
  return layOut({
    subject: `Receipt: ${data.offerName}, ${data.amountText}`,
    preheader: `Paid on ${data.paidText}`,
    heading: `Paid: ${data.amountText}`,
    blocks: [
      { kind: 'paragraph', text: `${firstNameOf(data.readerName)}, your payment has arrived. Keep this letter as your receipt.` },
      {
        kind: 'facts',
        rows: [
          { name: 'For', value: data.offerName },
          { name: 'Amount', value: data.amountText },
          { name: 'Paid on', value: data.paidText },
          { name: 'Order', value: data.orderId },
        ],
      },
      { kind: 'button', label: 'Your reviews', url: data.reviewsUrl },
    ],
    studioName: data.studioName,
    why: 'You get this letter because you paid for something here.',
  })
}
