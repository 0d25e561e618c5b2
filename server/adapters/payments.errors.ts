import Stripe from 'stripe'

/** The body is not one the provider signed with our secret in the last 300 s. Nothing in it may be believed. */
export class InvalidSignature extends Error {
  constructor(cause: unknown) {
    super('The webhook signature does not hold.', { cause })
    this.name = 'InvalidSignature'
  }
}

/** The provider said no and made no change. Trying the same again gets the same answer. */
export class PaymentsRefused extends Error {
  constructor(
    message: string,
    /** The provider's error code, such as `resource_missing`; null where it gives none. */
    readonly code: string | null,
    /** The parameter it objects to, as the provider spells it. */
    readonly param: string | null,
    cause: unknown,
  ) {
    super(message, { cause })
    this.name = 'PaymentsRefused'
  }
}

/** No answer, a broken one, or one to wait out: the change may or may not have been made. Ask again later. */
export class PaymentsUnavailable extends Error {
  constructor(message: string, cause: unknown) {
    super(message, { cause })
    this.name = 'PaymentsUnavailable'
  }
}

/**
 * Sorts the SDK's errors into the two that matter to a caller. A wrong key of ours (401, 403) counts as
 * unavailable: the order is sound and goes through once the setting is put right. Other errors pass unchanged.
 */
export function toPaymentsError(error: unknown): unknown {
  const { StripeError, StripeInvalidRequestError, StripeIdempotencyError, StripeCardError } = Stripe.errors
  if (!(error instanceof StripeError)) return error
  const isDefinite = error instanceof StripeInvalidRequestError
    || error instanceof StripeIdempotencyError
    || error instanceof StripeCardError
  return isDefinite
    ? new PaymentsRefused(error.message, error.code ?? null, error.param ?? null, error)
    : new PaymentsUnavailable(error.message, error)
}
