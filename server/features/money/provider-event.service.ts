import type { PaymentsEvent } from '#server/adapters/payments'
import { InvalidSignature } from '#server/adapters/payments'
import { idSchema } from '#shared/schemas/common'
import type { Ctx } from '#server/context'
import { inTransaction } from '#server/database/transaction'
import { Refusal } from '#server/refusal'
import { findOrderIdByCheckout, findOrderIdByPayment } from './order.repository'
import { settleOrder } from './settle.service'

/**
 * Keeps a signed event of the card provider, once, and takes it as a hint: the order that it is about is read again from the provider and
 * settled, so that order, number and delay of events do not matter.
 * @throws Refusal `bad-signature` (400), and nothing is written; `provider-unavailable` (503), and the provider sends it again.
 */
export async function receiveEvent(ctx: Ctx, input: { body: string, signature: string }): Promise<{ received: true }> {
  const event = readSigned(ctx, input)
  await inTransaction(ctx.db, async (db) => {
    await db.insertInto('provider_events')
      .values({ id: event.id, type: event.type, object_id: objectIdOf(event), created_at_ms: event.createdAtMs, received_at_ms: ctx.nowMs })
      .onConflict(conflict => conflict.doNothing())
      .execute()
  })
  const orderId = await findOrderId(ctx, event)
  if (orderId !== undefined) await settleOrder(ctx, orderId)
  return { received: true }
}

/** Which order an event is about; undefined for kinds that are not used and for payments that are not ours. */
async function findOrderId(ctx: Ctx, event: PaymentsEvent): Promise<string | undefined> {
  if ('checkoutId' in event) return findOrderIdByCheckout(ctx.db, event.checkoutId)
  if (!('paymentIntentId' in event) || event.paymentIntentId === null) return undefined
  const known = await findOrderIdByPayment(ctx.db, event.paymentIntentId)
  if (known !== undefined) return known
  // The payment may be told before its page was: its own reference names the order.
  const reference = 'reference' in event ? event.reference : null
  return reference !== null && idSchema.safeParse(reference).success ? reference : undefined
}

function readSigned(ctx: Ctx, { body, signature }: { body: string, signature: string }) {
  try {
    return ctx.payments.readEvent(body, signature)
  }
  catch (error) {
    if (error instanceof InvalidSignature) throw new Refusal('malformed', 'bad-signature', 'The signature does not fit this event.')
    throw error
  }
}

/** What the event is about; empty for kinds that are not used. */
function objectIdOf(event: PaymentsEvent): string {
  if ('checkoutId' in event) return event.checkoutId
  if ('disputeId' in event) return event.disputeId
  if ('chargeId' in event) return event.chargeId
  return 'paymentIntentId' in event ? event.paymentIntentId : ''
}
