import type Stripe from 'stripe'
import type {
  CheckoutSnapshot, DisputeSnapshot, PaymentIntentSnapshot, PaymentsEvent, RefundSnapshot,
} from './payments.types'

// The provider gives an object where it was asked to expand one, and its id where it was not.
function idOf(pointer: string | { id: string } | null): string | null {
  return typeof pointer === 'string' ? pointer : pointer?.id ?? null
}

/** A checkout session of the provider as a snapshot. Throws for one without a price, which is never asked for here. */
export function toCheckout(session: Stripe.Checkout.Session): CheckoutSnapshot {
  const { amount_total: amountMinor, currency } = session
  if (amountMinor === null || currency === null) throw new Error(`Checkout session ${session.id} has no price.`)
  return {
    id: session.id,
    url: session.url,
    status: toCheckoutStatus(session.status),
    isPaid: session.payment_status === 'paid',
    amountMinor,
    currency,
    reference: session.client_reference_id,
    paymentIntentId: idOf(session.payment_intent),
    metadata: session.metadata ?? {},
    createdAtMs: session.created * 1000,
    expiresAtMs: session.expires_at * 1000,
  }
}

function toCheckoutStatus(status: string | null): CheckoutSnapshot['status'] {
  if (status === 'complete') return 'complete'
  return status === 'expired' ? 'expired' : 'open'
}

/** A payment intent, read with `latest_charge` expanded: what was refunded and disputed stands on the charge. */
export function toPaymentIntent(intent: Stripe.PaymentIntent): PaymentIntentSnapshot {
  const charge = intent.latest_charge
  if (typeof charge === 'string') throw new Error(`Payment intent ${intent.id} was read without its charge.`)
  const decline = intent.last_payment_error
  return {
    id: intent.id,
    status: toPaymentStatus(intent.status),
    amountMinor: intent.amount,
    currency: intent.currency,
    receivedMinor: intent.amount_received,
    refundedMinor: charge?.amount_refunded ?? 0,
    isDisputed: charge?.disputed ?? false,
    latestChargeId: charge?.id ?? null,
    lastDecline: decline === null ? null : { code: decline.decline_code ?? decline.code ?? decline.type, message: decline.message ?? '' },
    reference: intent.metadata['reference'] ?? null,
    metadata: intent.metadata,
    createdAtMs: intent.created * 1000,
  }
}

// Every state but these three means that no money has been taken and some may still be.
function toPaymentStatus(status: string): PaymentIntentSnapshot['status'] {
  return status === 'succeeded' || status === 'processing' || status === 'canceled' ? status : 'unpaid'
}

/** A refund as a snapshot; a state we do not know counts as `pending`, so that nothing is taken for done. */
export function toRefund(refund: Stripe.Refund): RefundSnapshot {
  const { status } = refund
  return {
    id: refund.id,
    status: status === 'succeeded' || status === 'failed' || status === 'canceled' ? status : 'pending',
    amountMinor: refund.amount,
    currency: refund.currency,
    paymentIntentId: idOf(refund.payment_intent),
    metadata: refund.metadata ?? {},
    createdAtMs: refund.created * 1000,
  }
}

/** A dispute as a snapshot; every state before the bank's decision is `open`. */
export function toDispute(dispute: Stripe.Dispute): DisputeSnapshot {
  return {
    id: dispute.id,
    status: toDisputeStatus(dispute.status),
    amountMinor: dispute.amount,
    currency: dispute.currency,
    reason: dispute.reason,
    paymentIntentId: idOf(dispute.payment_intent),
    createdAtMs: dispute.created * 1000,
  }
}

// A warning that is closed, and a dispute prevented before it began, took no money: for us both are won.
function toDisputeStatus(status: string): DisputeSnapshot['status'] {
  if (status === 'lost') return 'lost'
  return status === 'won' || status === 'warning_closed' || status === 'prevented' ? 'won' : 'open'
}

/** A verified event, reduced to the ids of what it is about; a kind not used here becomes `other`. */
export function toEvent(event: Stripe.Event): PaymentsEvent {
  const base = { id: event.id, type: event.type, createdAtMs: event.created * 1000 }
  switch (event.type) {
    case 'checkout.session.completed':
    case 'checkout.session.expired': {
      const { object } = event.data
      const kind = event.type === 'checkout.session.completed' ? 'checkout-completed' : 'checkout-expired'
      return { ...base, kind, checkoutId: object.id, reference: object.client_reference_id }
    }
    case 'payment_intent.succeeded':
    case 'payment_intent.payment_failed': {
      const { object } = event.data
      const kind = event.type === 'payment_intent.succeeded' ? 'payment-succeeded' : 'payment-failed'
      return { ...base, kind, paymentIntentId: object.id, reference: object.metadata['reference'] ?? null }
    }
    case 'charge.refunded':
      return { ...base, kind: 'payment-refunded', chargeId: event.data.object.id, paymentIntentId: idOf(event.data.object.payment_intent) }
    case 'charge.dispute.created':
    case 'charge.dispute.closed': {
      const { object } = event.data
      const kind = event.type === 'charge.dispute.created' ? 'dispute-opened' : 'dispute-closed'
      return { ...base, kind, disputeId: object.id, paymentIntentId: idOf(object.payment_intent) }
    }
    default:
      return { ...base, kind: 'other' }
  }
}
