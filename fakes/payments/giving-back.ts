import { formatMinor } from './currencies'
import type { StoredCharge, StoredDispute, StoredPaymentIntent, StoredRefund } from './objects'
import type { CreateRefundParameters } from './parameters'
import { refuse } from './refusals'
import { newId } from './store'
import type { Cause, World } from './world'
import { NO_CAUSE, recordEvent } from './world'

/** Gives back all that is left of a payment, or `amount` of it. */
export function createRefund(world: World, given: CreateRefundParameters, cause: Cause): StoredRefund {
  const charge = chargeToRefund(world, given)
  const dispute = findDispute(world, charge)
  if (dispute !== undefined && dispute.status !== 'won') {
    refuse('refund-disputed', `Charge ${charge.id} has been charged back; cannot issue a refund.`)
  }
  const left = charge.amount - charge.amount_refunded
  if (left === 0) refuse('refund-again', `Charge ${charge.id} has already been refunded.`)
  const amount = given.amount ?? left
  if (amount > left) {
    refuse('refund-too-large', `Refund amount (${formatMinor(amount, charge.currency)}) is greater than unrefunded amount on charge (${formatMinor(left, charge.currency)})`, 'amount')
  }
  const refund: StoredRefund = {
    id: newId('re'),
    object: 'refund',
    amount,
    charge: charge.id,
    created: world.nowSeconds(),
    currency: charge.currency,
    metadata: given.metadata ?? {},
    payment_intent: charge.payment_intent,
    reason: given.reason ?? null,
    status: 'succeeded',
  }
  world.store.state.refunds[refund.id] = refund
  charge.amount_refunded += amount
  charge.refunded = charge.amount_refunded === charge.amount
  recordEvent(world, 'charge.refunded', charge, cause)
  return refund
}

function chargeToRefund(world: World, given: CreateRefundParameters): StoredCharge {
  const { charges, paymentIntents } = world.store.state
  if (given.payment_intent !== undefined && given.charge !== undefined) {
    return refuse('refund-of-two', 'You may only specify one of these parameters: payment_intent, charge.')
  }
  if (given.charge !== undefined) {
    const charge = charges[given.charge]
    if (charge === undefined) return refuse('reference-missing', `No such charge: '${given.charge}'`, 'charge')
    return paidCharge(world, charge.payment_intent)
  }
  if (given.payment_intent === undefined) {
    return refuse('refund-of-nothing', 'One of the following params should be provided for this request: payment_intent or charge.')
  }
  if (paymentIntents[given.payment_intent] === undefined) {
    return refuse('reference-missing', `No such payment_intent: '${given.payment_intent}'`, 'payment_intent')
  }
  return paidCharge(world, given.payment_intent)
}

function paidCharge(world: World, paymentIntentId: string): StoredCharge {
  return findPaidCharge(world, paymentIntentId)
    ?? refuse('refund-of-unpaid', `This PaymentIntent (${paymentIntentId}) does not have a successful charge to refund.`)
}

function findPaidCharge(world: World, paymentIntentId: string): StoredCharge | undefined {
  return Object.values(world.store.state.charges).find(charge => charge.payment_intent === paymentIntentId && charge.paid)
}

function findDispute(world: World, charge: StoredCharge): StoredDispute | undefined {
  return Object.values(world.store.state.disputes).find(dispute => dispute.charge === charge.id)
}

/** The cardholder's bank takes back all that was not refunded. One dispute a payment, as card networks have it. */
export function openDispute(world: World, intent: StoredPaymentIntent): StoredDispute {
  const charge = findPaidCharge(world, intent.id)
    ?? refuse('dispute-of-unpaid', `PaymentIntent ${intent.id} was never paid, so it cannot be disputed.`)
  const left = charge.amount - charge.amount_refunded
  if (left === 0) refuse('dispute-again', `Nothing is left of charge ${charge.id} to dispute.`)
  if (charge.disputed) refuse('dispute-again', `Charge ${charge.id} has been disputed before.`)
  const dispute: StoredDispute = {
    id: newId('du'),
    object: 'dispute',
    amount: left,
    charge: charge.id,
    created: world.nowSeconds(),
    currency: charge.currency,
    is_charge_refundable: false,
    livemode: false,
    metadata: {},
    payment_intent: intent.id,
    reason: 'product_not_received',
    status: 'needs_response',
  }
  world.store.state.disputes[dispute.id] = dispute
  charge.disputed = true
  recordEvent(world, 'charge.dispute.created', dispute, NO_CAUSE)
  return dispute
}

/** The bank decides: `won` leaves the money with the studio, `lost` with the cardholder. */
export function closeDispute(world: World, dispute: StoredDispute, status: 'won' | 'lost'): StoredDispute {
  if (dispute.status !== 'needs_response') refuse('dispute-closed', `Dispute ${dispute.id} is closed already (${dispute.status}).`)
  dispute.status = status
  recordEvent(world, 'charge.dispute.closed', dispute, NO_CAUSE)
  return dispute
}
