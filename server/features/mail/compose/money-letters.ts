import { formatMoney } from '#shared/utils/money'
import { formatMoment } from '#shared/utils/times'
import { findOrder } from '#server/features/money/order.repository'
import { findRefund } from '#server/features/money/refund.repository'
import { writeLetter } from '../letters'
import type { Composer } from './material'
import { pageUrl } from './material'

export const receipt: Composer = async ({ ctx, row, studio, reader, timeZone }) => {
  const order = await findOrder(ctx.db, row.subject_id)
  if (!order || !reader) return undefined
  return writeLetter('receipt', {
    studioName: studio.name,
    readerName: reader.name,
    offerName: order.offer_name,
    amountText: formatMoney(order.amount_minor, order.currency),
    paidText: formatMoment(order.settled_at_ms ?? row.created_at_ms, timeZone),
    orderId: order.id,
    reviewsUrl: pageUrl(ctx, '/reviews'),
  })
}

export const moneyBack: Composer = async ({ ctx, row, studio, reader }) => {
  const refund = await findRefund(ctx.db, row.subject_id)
  if (!refund || !reader) return undefined
  return writeLetter('money-back', {
    studioName: studio.name,
    readerName: reader.name,
    amountText: formatMoney(refund.amount_minor, refund.currency),
    reason: refund.reason,
    orderId: refund.order_id,
    reviewsUrl: pageUrl(ctx, '/reviews'),
  })
}
