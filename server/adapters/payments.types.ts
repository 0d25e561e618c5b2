/** An amount in the minor unit of its currency (pence, cents, whole yen); `currency` is lower-case ISO 4217. */
export interface Amount {
  amountMinor: number
  currency: string
}

export interface CheckoutInput {
  /** Our own id of what is paid for, up to 200 characters; comes back on page, payment and their events. */
  reference: string
  items: { name: string, unitAmountMinor: number, quantity: number }[]
  /** Lower-case ISO 4217. */
  currency: string
  /** `{CHECKOUT_SESSION_ID}` in it is replaced by the id of the page. */
  successUrl: string
  cancelUrl: string
  customerEmail?: string | undefined
  /**
   * When the page closes, UTC epoch ms, rounded up to a second. The provider takes only times from 30 minutes to
   * 24 hours away by its own clock, so leave some slack over 30 minutes; left out, it is 24 hours. Keep the same
   * value when repeating a call: the provider refuses a known idempotency key with another one.
   */
  expiresAtMs?: number | undefined
  metadata?: Readonly<Record<string, string>> | undefined
  idempotencyKey: string
}

export interface CheckoutSnapshot extends Amount {
  id: string
  /** Null once the page is closed. */
  url: string | null
  status: 'open' | 'complete' | 'expired'
  isPaid: boolean
  reference: string | null
  /** Null until somebody first tries to pay. */
  paymentIntentId: string | null
  metadata: Readonly<Record<string, string>>
  createdAtMs: number
  expiresAtMs: number
}

export interface PaymentIntentSnapshot extends Amount {
  id: string
  status: 'unpaid' | 'processing' | 'succeeded' | 'canceled'
  /** What was taken from the card. */
  receivedMinor: number
  /** What went back to it, all refunds together. */
  refundedMinor: number
  /** True from the moment a dispute opens, however it ends. */
  isDisputed: boolean
  latestChargeId: string | null
  /** Why the last try failed, while none has succeeded. */
  lastDecline: { code: string, message: string } | null
  reference: string | null
  metadata: Readonly<Record<string, string>>
  createdAtMs: number
}

export interface RefundInput {
  paymentIntentId: string
  /** In the payment's currency, at least 1 and at most what is left. */
  amountMinor: number
  metadata?: Readonly<Record<string, string>> | undefined
}

export interface RefundSnapshot extends Amount {
  id: string
  /** `pending` may still become either of the two last. */
  status: 'pending' | 'succeeded' | 'failed' | 'canceled'
  paymentIntentId: string | null
  metadata: Readonly<Record<string, string>>
  createdAtMs: number
}

export interface DisputeSnapshot extends Amount {
  id: string
  /** `open` as long as the bank has not decided. */
  status: 'open' | 'won' | 'lost'
  reason: string
  paymentIntentId: string | null
  createdAtMs: number
}

/** What an event is about. Only ids: the object is read again from the provider before anything is done. */
export type PaymentsEvent = { id: string, type: string, createdAtMs: number } & (
  | { kind: 'checkout-completed' | 'checkout-expired', checkoutId: string, reference: string | null }
  | { kind: 'payment-succeeded' | 'payment-failed', paymentIntentId: string, reference: string | null }
  | { kind: 'payment-refunded', chargeId: string, paymentIntentId: string | null }
  | { kind: 'dispute-opened' | 'dispute-closed', disputeId: string, paymentIntentId: string | null }
  | { kind: 'other' }
)
