import { formatMinor, MAXIMUM_CHARGE_MINOR, MINIMUM_CHARGE_MINOR } from './currencies'
import type { StoredCharge, StoredLineItem, StoredPaymentIntent, StoredSession } from './objects'
import type { CreateSessionParameters } from './parameters'
import { refuse } from './refusals'
import { newId } from './store'
import type { Cause, World } from './world'
import { NO_CAUSE, recordEvent } from './world'

const SHORTEST_LIFE_SECONDS = 30 * 60
const LONGEST_LIFE_SECONDS = 24 * 60 * 60

/** The checks on the parameters of a session that need more than one of them, or the clock. */
export function checkSession(world: World, given: CreateSessionParameters): void {
  const items = given.line_items.map(line => toLineItem(line))
  checkTotal(totalOf(items), oneCurrency(items))
  if (given.expires_at !== undefined) checkExpiry(given.expires_at, world.nowSeconds())
}

/** Opens a session that was checked. The payment intent comes into being only when somebody first tries to pay. */
export function createSession(world: World, given: CreateSessionParameters): StoredSession {
  const items = given.line_items.map(line => toLineItem(line))
  const total = totalOf(items)
  const created = world.nowSeconds()
  const id = newId('cs_test')
  const session: StoredSession = {
    id,
    object: 'checkout.session',
    amount_subtotal: total,
    amount_total: total,
    cancel_url: given.cancel_url ?? null,
    client_reference_id: given.client_reference_id ?? null,
    created,
    currency: oneCurrency(items),
    customer_email: given.customer_email ?? null,
    expires_at: given.expires_at ?? created + LONGEST_LIFE_SECONDS,
    livemode: false,
    metadata: given.metadata ?? {},
    mode: 'payment',
    payment_intent: null,
    payment_method_types: ['card'],
    payment_status: 'unpaid',
    status: 'open',
    success_url: given.success_url,
    url: `${world.origin}/pay/${id}`,
  }
  const { state } = world.store
  state.sessions[id] = session
  state.lineItems[id] = items
  state.intentMetadata[id] = given.payment_intent_data?.metadata ?? {}
  return session
}

function toLineItem(line: CreateSessionParameters['line_items'][number]): StoredLineItem {
  const amount = line.price_data.unit_amount * line.quantity
  return {
    id: newId('li'),
    object: 'item',
    amount_discount: 0,
    amount_subtotal: amount,
    amount_tax: 0,
    amount_total: amount,
    currency: line.price_data.currency,
    description: line.price_data.product_data.name,
    quantity: line.quantity,
  }
}

function totalOf(items: readonly StoredLineItem[]): number {
  return items.reduce((sum, line) => sum + line.amount_total, 0)
}

function oneCurrency(items: StoredLineItem[]): string {
  const [first] = items
  if (first === undefined) return refuse('parameter-missing', 'Missing required param: line_items.', 'line_items')
  const other = items.find(line => line.currency !== first.currency)
  if (other !== undefined) {
    refuse('currencies-differ', `All line items must have the same currency: ${first.currency} and ${other.currency} were given.`, 'line_items')
  }
  return first.currency
}

function checkTotal(total: number, currency: string): void {
  const minimum = MINIMUM_CHARGE_MINOR[currency] ?? 0
  if (total < minimum) {
    refuse('amount-too-small', `The Checkout Session's total amount must be at least ${formatMinor(minimum, currency)}.`, 'line_items')
  }
  if (total > MAXIMUM_CHARGE_MINOR) {
    refuse('amount-too-large', `The Checkout Session's total amount must be no more than ${formatMinor(MAXIMUM_CHARGE_MINOR, currency)}.`, 'line_items')
  }
}

function checkExpiry(expiresAt: number, created: number): void {
  if (expiresAt < created + SHORTEST_LIFE_SECONDS) {
    refuse('expiry-too-soon', 'The `expires_at` timestamp must be at least 30 minutes from Checkout Session creation.', 'expires_at')
  }
  if (expiresAt > created + LONGEST_LIFE_SECONDS) {
    refuse('expiry-too-late', 'The `expires_at` timestamp must be less than 24 hours from Checkout Session creation.', 'expires_at')
  }
}

/** Ends an open session on request; a session that is paid or already expired is refused. */
export function expireSession(world: World, session: StoredSession, cause: Cause): StoredSession {
  if (session.status !== 'open') {
    refuse('session-not-open', `Only Checkout Sessions with a status in ["open"] can be expired. This Checkout Session has a status of \`${session.status}\`.`)
  }
  endSession(world, session, cause)
  return session
}

/** Ends every open session whose time is over. True when one was. */
export function expireDueSessions(world: World): boolean {
  const due = Object.values(world.store.state.sessions)
    .filter(session => session.status === 'open' && session.expires_at <= world.nowSeconds())
  for (const session of due) endSession(world, session, NO_CAUSE)
  return due.length > 0
}

function endSession(world: World, session: StoredSession, cause: Cause): void {
  session.status = 'expired'
  session.url = null
  const intent = session.payment_intent === null ? undefined : world.store.state.paymentIntents[session.payment_intent]
  if (intent !== undefined) intent.status = 'canceled'
  recordEvent(world, 'checkout.session.expired', session, cause)
}

/** The card is charged: session complete, payment intent succeeded, two events. Refuses a second payment and an expired session. */
export function paySession(world: World, session: StoredSession): StoredSession {
  const intent = attempt(world, session)
  const charge = addCharge(world, intent, true)
  Object.assign(intent, { status: 'succeeded', amount_received: intent.amount, latest_charge: charge.id, last_payment_error: null } satisfies Partial<StoredPaymentIntent>)
  Object.assign(session, { status: 'complete', payment_status: 'paid', url: null } satisfies Partial<StoredSession>)
  recordEvent(world, 'payment_intent.succeeded', intent, NO_CAUSE)
  recordEvent(world, 'checkout.session.completed', session, NO_CAUSE)
  return session
}

/** The card is declined: the session stays open for another try, the payment intent keeps the reason. */
export function declineSession(world: World, session: StoredSession): StoredSession {
  const intent = attempt(world, session)
  const charge = addCharge(world, intent, false)
  intent.latest_charge = charge.id
  intent.last_payment_error = {
    charge: charge.id,
    code: 'card_declined',
    decline_code: 'generic_decline',
    message: 'Your card was declined.',
    type: 'card_error',
  }
  recordEvent(world, 'payment_intent.payment_failed', intent, NO_CAUSE)
  return session
}

function attempt(world: World, session: StoredSession): StoredPaymentIntent {
  if (session.status === 'complete') refuse('session-paid', 'This Checkout Session has already been paid.')
  if (session.status === 'expired') refuse('session-expired', 'This Checkout Session has expired.')
  const { state } = world.store
  const begun = session.payment_intent === null ? undefined : state.paymentIntents[session.payment_intent]
  if (begun !== undefined) return begun
  const intent: StoredPaymentIntent = {
    id: newId('pi'),
    object: 'payment_intent',
    amount: session.amount_total,
    amount_received: 0,
    created: world.nowSeconds(),
    currency: session.currency,
    last_payment_error: null,
    latest_charge: null,
    livemode: false,
    metadata: state.intentMetadata[session.id] ?? {},
    payment_method_types: ['card'],
    status: 'requires_payment_method',
  }
  state.paymentIntents[intent.id] = intent
  session.payment_intent = intent.id
  return intent
}

function addCharge(world: World, intent: StoredPaymentIntent, isPaid: boolean): StoredCharge {
  const charge: StoredCharge = {
    id: newId('ch'),
    object: 'charge',
    amount: intent.amount,
    amount_captured: isPaid ? intent.amount : 0,
    amount_refunded: 0,
    captured: isPaid,
    created: world.nowSeconds(),
    currency: intent.currency,
    disputed: false,
    failure_code: isPaid ? null : 'card_declined',
    failure_message: isPaid ? null : 'Your card was declined.',
    livemode: false,
    metadata: intent.metadata,
    paid: isPaid,
    payment_intent: intent.id,
    refunded: false,
    status: isPaid ? 'succeeded' : 'failed',
  }
  world.store.state.charges[charge.id] = charge
  return charge
}
