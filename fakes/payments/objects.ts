import type Stripe from 'stripe'
import { z } from 'zod'

/**
 * The objects this stand-in keeps and answers: only the fields in use, each checked by the compiler against the
 * type the SDK gives that field, so that an SDK upgrade that renames one fails the type check here.
 */
function speaks<Whole>() {
  return <Schema extends z.ZodType<Partial<Whole>>>(
    schema: Exclude<keyof z.infer<Schema>, keyof Whole> extends never ? Schema : never,
  ): Schema => schema
}

const id = z.string()
const seconds = z.number().int()
const minor = z.number().int()
const metadata = z.record(z.string(), z.string())

export const sessionSchema = speaks<Stripe.Checkout.Session>()(z.strictObject({
  id,
  object: z.literal('checkout.session'),
  amount_subtotal: minor,
  amount_total: minor,
  cancel_url: z.string().nullable(),
  client_reference_id: z.string().nullable(),
  created: seconds,
  currency: z.string(),
  customer_email: z.string().nullable(),
  expires_at: seconds,
  livemode: z.literal(false),
  metadata,
  mode: z.literal('payment'),
  payment_intent: z.string().nullable(),
  payment_method_types: z.array(z.string()),
  payment_status: z.enum(['paid', 'unpaid']),
  status: z.enum(['open', 'complete', 'expired']),
  success_url: z.string(),
  url: z.string().nullable(),
}))

export const lineItemSchema = speaks<Stripe.LineItem>()(z.strictObject({
  id,
  object: z.literal('item'),
  amount_discount: minor,
  amount_subtotal: minor,
  amount_tax: minor,
  amount_total: minor,
  currency: z.string(),
  description: z.string(),
  quantity: z.number().int(),
}))

export const paymentIntentSchema = speaks<Stripe.PaymentIntent>()(z.strictObject({
  id,
  object: z.literal('payment_intent'),
  amount: minor,
  amount_received: minor,
  created: seconds,
  currency: z.string(),
  last_payment_error: z.strictObject({
    charge: z.string(),
    code: z.literal('card_declined'),
    decline_code: z.literal('generic_decline'),
    message: z.string(),
    type: z.literal('card_error'),
  }).nullable(),
  latest_charge: z.string().nullable(),
  livemode: z.literal(false),
  metadata,
  payment_method_types: z.array(z.string()),
  status: z.enum(['requires_payment_method', 'succeeded', 'canceled']),
}))

export const chargeSchema = speaks<Stripe.Charge>()(z.strictObject({
  id,
  object: z.literal('charge'),
  amount: minor,
  amount_captured: minor,
  amount_refunded: minor,
  captured: z.boolean(),
  created: seconds,
  currency: z.string(),
  disputed: z.boolean(),
  failure_code: z.string().nullable(),
  failure_message: z.string().nullable(),
  livemode: z.literal(false),
  metadata,
  paid: z.boolean(),
  payment_intent: z.string(),
  refunded: z.boolean(),
  status: z.enum(['succeeded', 'failed']),
}))

export const refundSchema = speaks<Stripe.Refund>()(z.strictObject({
  id,
  object: z.literal('refund'),
  amount: minor,
  charge: z.string(),
  created: seconds,
  currency: z.string(),
  metadata,
  payment_intent: z.string(),
  reason: z.enum(['duplicate', 'fraudulent', 'requested_by_customer']).nullable(),
  status: z.literal('succeeded'),
}))

export const disputeSchema = speaks<Stripe.Dispute>()(z.strictObject({
  id,
  object: z.literal('dispute'),
  amount: minor,
  charge: z.string(),
  created: seconds,
  currency: z.string(),
  is_charge_refundable: z.literal(false),
  livemode: z.literal(false),
  metadata,
  payment_intent: z.string(),
  reason: z.string(),
  status: z.enum(['needs_response', 'won', 'lost']),
}))

export const EVENT_TYPES = [
  'checkout.session.completed',
  'checkout.session.expired',
  'payment_intent.succeeded',
  'payment_intent.payment_failed',
  'charge.refunded',
  'charge.dispute.created',
  'charge.dispute.closed',
] as const

export const eventSchema = speaks<Stripe.EventBase>()(z.strictObject({
  id,
  object: z.literal('event'),
  api_version: z.string(),
  created: seconds,
  data: z.strictObject({ object: z.union([sessionSchema, paymentIntentSchema, chargeSchema, disputeSchema]) }),
  livemode: z.literal(false),
  pending_webhooks: z.number().int(),
  request: z.strictObject({ id: z.string().nullable(), idempotency_key: z.string().nullable() }),
  type: z.enum(EVENT_TYPES),
}))

export type StoredSession = z.infer<typeof sessionSchema>
export type StoredLineItem = z.infer<typeof lineItemSchema>
export type StoredPaymentIntent = z.infer<typeof paymentIntentSchema>
export type StoredCharge = z.infer<typeof chargeSchema>
export type StoredRefund = z.infer<typeof refundSchema>
export type StoredDispute = z.infer<typeof disputeSchema>
export type StoredEvent = z.infer<typeof eventSchema>
export type EventType = StoredEvent['type']
