import Stripe from 'stripe'
import { InvalidSignature, toPaymentsError } from './payments.errors'
import type {
  CheckoutInput, CheckoutSnapshot, DisputeSnapshot, PaymentIntentSnapshot, PaymentsEvent, RefundInput, RefundSnapshot,
} from './payments.types'
import { toCheckout, toDispute, toEvent, toPaymentIntent, toRefund } from './payments.wire'

export * from './payments.errors'
export type * from './payments.types'

export interface PaymentsSettings {
  secretKey: string
  webhookSecret: string
  /** Where the service answers, for example `http://127.0.0.1:3102`; undefined means the real one. */
  apiBase: string | undefined
}

/**
 * Card payments. Every call but `readEvent` goes over the network and throws `PaymentsRefused` when the provider
 * said no (trying again changes nothing) or `PaymentsUnavailable` when nobody knows whether the change was made:
 * then repeat the call with the same idempotency key, or read the object again. The provider remembers a key for
 * 24 hours; after that only reading tells.
 */
export interface Payments {
  /** Opens a page to pay on. The same key with the same input gives the same page. */
  createCheckout: (input: CheckoutInput) => Promise<{ id: string, url: string, expiresAtMs: number }>
  /** The state of a page now. Unknown id: `PaymentsRefused` with code `resource_missing`. */
  getCheckout: (id: string) => Promise<CheckoutSnapshot>
  /** Closes an open page so that it can no longer be paid. One already paid or expired: `PaymentsRefused`. */
  expireCheckout: (id: string) => Promise<CheckoutSnapshot>
  getPaymentIntent: (id: string) => Promise<PaymentIntentSnapshot>
  /**
   * Gives money back to the card. Refused when nothing is left (`charge_already_refunded`), when more is asked
   * than is left (no code), and when the payment is in dispute (`charge_disputed`).
   */
  refund: (input: RefundInput, idempotencyKey: string) => Promise<RefundSnapshot>
  /** The refunds of one payment, newest first, a hundred at most: tells what became of one nobody knows about. */
  listRefunds: (paymentIntentId: string) => Promise<RefundSnapshot[]>
  getDispute: (id: string) => Promise<DisputeSnapshot>
  /**
   * Checks the signature over the body exactly as it came in (never parsed and written again) and that it is at
   * most 300 s old by the machine's clock. Throws `InvalidSignature` for anything else. An event is a hint: read
   * the object it names before acting. Kinds not used here come back as `other`.
   */
  readEvent: (rawBody: string | Buffer, signature: string) => PaymentsEvent
}

const TIMEOUT_MS = 10_000
const RETRIES = 2

/** The one implementation of `Payments`, on the provider's own SDK. No request is made until a method is called. */
export function createPayments(settings: PaymentsSettings): Payments {
  const stripe = new Stripe(settings.secretKey, {
    ...addressOf(settings.apiBase),
    maxNetworkRetries: RETRIES,
    timeout: TIMEOUT_MS,
    telemetry: false,
  })
  return {
    createCheckout: input => withOwnErrors(async () => {
      const session = await stripe.checkout.sessions.create(toSessionParameters(input), { idempotencyKey: input.idempotencyKey })
      if (session.url === null) throw new Error(`Checkout session ${session.id} came back without an address to pay at.`)
      return { id: session.id, url: session.url, expiresAtMs: session.expires_at * 1000 }
    }),
    getCheckout: id => withOwnErrors(async () => toCheckout(await stripe.checkout.sessions.retrieve(id))),
    expireCheckout: id => withOwnErrors(async () => toCheckout(
      await stripe.checkout.sessions.expire(id, {}, { idempotencyKey: `expire-${id}` }),
    )),
    getPaymentIntent: id => withOwnErrors(async () => toPaymentIntent(
      await stripe.paymentIntents.retrieve(id, { expand: ['latest_charge'] }),
    )),
    refund: (input, idempotencyKey) => withOwnErrors(async () => toRefund(
      await stripe.refunds.create(toRefundParameters(input), { idempotencyKey }),
    )),
    listRefunds: paymentIntentId => withOwnErrors(async () => {
      const page = await stripe.refunds.list({ payment_intent: paymentIntentId, limit: 100 })
      return page.data.map(toRefund)
    }),
    getDispute: id => withOwnErrors(async () => toDispute(await stripe.disputes.retrieve(id))),
    readEvent: (rawBody, signature) => toEvent(verified(stripe, rawBody, signature, settings.webhookSecret)),
  }
}

function addressOf(apiBase: string | undefined): Pick<NonNullable<ConstructorParameters<typeof Stripe>[1]>, 'host' | 'port' | 'protocol'> {
  if (apiBase === undefined) return {}
  const { hostname, port, protocol } = new URL(apiBase)
  const isPlain = protocol === 'http:'
  return { host: hostname, port: port === '' ? (isPlain ? 80 : 443) : Number(port), protocol: isPlain ? 'http' : 'https' }
}

async function withOwnErrors<Answer>(ask: () => Promise<Answer>): Promise<Answer> {
  try {
    return await ask()
  }
  catch (error) {
    throw toPaymentsError(error)
  }
}

function verified(stripe: Stripe, rawBody: string | Buffer, signature: string, secret: string): Stripe.Event {
  try {
    return stripe.webhooks.constructEvent(rawBody, signature, secret)
  }
  catch (error) {
    throw new InvalidSignature(error)
  }
}

// The reference travels on the page and on the payment, so that a refund or dispute leads back to the order too.
function toSessionParameters(input: CheckoutInput): Stripe.Checkout.SessionCreateParams {
  const metadata = { ...input.metadata, reference: input.reference }
  return {
    mode: 'payment',
    line_items: input.items.map(item => ({
      price_data: { currency: input.currency, product_data: { name: item.name }, unit_amount: item.unitAmountMinor },
      quantity: item.quantity,
    })),
    success_url: input.successUrl,
    cancel_url: input.cancelUrl,
    client_reference_id: input.reference,
    metadata,
    payment_intent_data: { metadata },
    ...(input.customerEmail === undefined ? {} : { customer_email: input.customerEmail }),
    ...(input.expiresAtMs === undefined ? {} : { expires_at: Math.ceil(input.expiresAtMs / 1000) }),
  }
}

function toRefundParameters(input: RefundInput): Stripe.RefundCreateParams {
  return {
    payment_intent: input.paymentIntentId,
    amount: input.amountMinor,
    reason: 'requested_by_customer',
    ...(input.metadata === undefined ? {} : { metadata: input.metadata }),
  }
}
