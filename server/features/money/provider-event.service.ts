import type { PaymentsEvent } from '#server/adapters/payments'
import { InvalidSignature } from '#server/adapters/payments'
import type { Ctx } from '#server/context'
import { inTransaction } from '#server/database/transaction'
import { Refusal } from '#server/refusal'

/**
 * Keeps a signed event of the card provider, once. It is only a hint: what it is about is read again from the provider before anything
 * is done, and nothing is sold by card yet.
 * @throws Refusal `bad-signature` (400); nothing is written.
 */
export async function receiveEvent(ctx: Ctx, input: { body: string, signature: string }): Promise<{ received: true }> {
  const event = readSigned(ctx, input)
  await inTransaction(ctx.db, async (db) => {
    await db.insertInto('provider_events')
      .values({ id: event.id, type: event.type, object_id: objectIdOf(event), created_at_ms: event.createdAtMs, received_at_ms: ctx.nowMs })
      .onConflict(conflict => conflict.doNothing())
      .execute()
  })
  return { received: true }
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
