/**
 * Everything this stand-in refuses, as a table: the rest of the code can refuse only by naming a row, and each
 * row has a test of its own. `code` is what the real service answers; rows without one have none there either.
 */
export interface Refusal {
  status: number
  type: 'invalid_request_error' | 'idempotency_error' | 'api_error'
  code?: string
  when: string
}

export const REFUSALS = {
  'key-missing': { status: 401, type: 'invalid_request_error', when: 'no bearer key is sent' },
  'key-wrong': { status: 401, type: 'invalid_request_error', when: 'the bearer key is not the secret key' },
  'version-unreadable': { status: 400, type: 'invalid_request_error', when: 'Stripe-Version is not a version' },
  'request-unknown': { status: 404, type: 'invalid_request_error', when: 'method and path are not spoken here' },
  'form-expected': { status: 400, type: 'invalid_request_error', when: 'a body is not form-encoded' },
  'body-too-large': { status: 413, type: 'invalid_request_error', when: 'a body is over one megabyte' },
  'parameter-unknown': { status: 400, type: 'invalid_request_error', code: 'parameter_unknown', when: 'a parameter is not known here' },
  'parameter-missing': { status: 400, type: 'invalid_request_error', code: 'parameter_missing', when: 'a required parameter is left out' },
  'parameter-empty': { status: 400, type: 'invalid_request_error', code: 'parameter_invalid_empty', when: 'a parameter is the empty string' },
  'parameter-integer': { status: 400, type: 'invalid_request_error', code: 'parameter_invalid_integer', when: 'a whole number is not one, or out of range' },
  'parameter-shape': { status: 400, type: 'invalid_request_error', when: 'text stands for an object, or the other way round' },
  'parameter-value': { status: 400, type: 'invalid_request_error', when: 'a value is not one of those allowed' },
  'parameter-too-long': { status: 400, type: 'invalid_request_error', when: 'a text or list is longer than allowed' },
  'url-invalid': { status: 400, type: 'invalid_request_error', code: 'url_invalid', when: 'an address is not http or https' },
  'email-invalid': { status: 400, type: 'invalid_request_error', code: 'email_invalid', when: 'an e-mail address is not one' },
  'metadata-too-large': { status: 400, type: 'invalid_request_error', when: 'over 50 keys, 40 characters a key or 500 a value' },
  'expand-unknown': { status: 400, type: 'invalid_request_error', when: 'a property that cannot be expanded is named' },
  'resource-missing': { status: 404, type: 'invalid_request_error', code: 'resource_missing', when: 'the id in the path is not known' },
  'reference-missing': { status: 400, type: 'invalid_request_error', code: 'resource_missing', when: 'an id in the parameters is not known' },
  'currency-unknown': { status: 400, type: 'invalid_request_error', when: 'the currency is not known here' },
  'currencies-differ': { status: 400, type: 'invalid_request_error', when: 'line items are in different currencies' },
  'amount-too-small': { status: 400, type: 'invalid_request_error', code: 'amount_too_small', when: 'the total is below the minimum of its currency' },
  'amount-too-large': { status: 400, type: 'invalid_request_error', code: 'amount_too_large', when: 'the total has more than eight digits' },
  'expiry-too-soon': { status: 400, type: 'invalid_request_error', when: 'expires_at is less than 30 minutes away' },
  'expiry-too-late': { status: 400, type: 'invalid_request_error', when: 'expires_at is more than 24 hours away' },
  'session-not-open': { status: 400, type: 'invalid_request_error', when: 'a session that is not open is expired' },
  'session-paid': { status: 400, type: 'invalid_request_error', code: 'payment_intent_unexpected_state', when: 'a session is paid a second time' },
  'session-expired': { status: 400, type: 'invalid_request_error', code: 'payment_intent_unexpected_state', when: 'an expired session is paid or declined' },
  'refund-of-nothing': { status: 400, type: 'invalid_request_error', code: 'parameter_missing', when: 'neither payment_intent nor charge is named' },
  'refund-of-two': { status: 400, type: 'invalid_request_error', code: 'parameters_exclusive', when: 'both payment_intent and charge are named' },
  'refund-of-unpaid': { status: 400, type: 'invalid_request_error', when: 'the payment never succeeded' },
  'refund-again': { status: 400, type: 'invalid_request_error', code: 'charge_already_refunded', when: 'nothing is left to give back' },
  'refund-too-large': { status: 400, type: 'invalid_request_error', when: 'more is asked than is left' },
  'refund-disputed': { status: 400, type: 'invalid_request_error', code: 'charge_disputed', when: 'the payment is in dispute or lost to one' },
  'dispute-of-unpaid': { status: 400, type: 'invalid_request_error', when: 'a payment that never succeeded is disputed' },
  'dispute-again': { status: 400, type: 'invalid_request_error', when: 'a payment is disputed a second time, or nothing is left of it' },
  'dispute-closed': { status: 400, type: 'invalid_request_error', when: 'a closed dispute is closed again' },
  'idempotency-key-long': { status: 400, type: 'idempotency_error', when: 'an idempotency key is over 255 characters' },
  'idempotency-other-parameters': { status: 400, type: 'idempotency_error', when: 'a key comes back with other parameters' },
  'idempotency-other-path': { status: 400, type: 'idempotency_error', when: 'a key comes back on another path' },
  'idempotency-in-flight': { status: 409, type: 'idempotency_error', code: 'idempotency_key_in_use', when: 'a key comes back while its first request is being answered' },
  'control-unreadable': { status: 400, type: 'invalid_request_error', when: 'a control request is not JSON of the expected shape' },
  'webhook-address-missing': { status: 400, type: 'invalid_request_error', when: 'delivery is asked for with no address set' },
  'webhook-not-local': { status: 400, type: 'invalid_request_error', when: 'the webhook address is not on this machine' },
} as const satisfies Record<string, Refusal>

export type RefusalName = keyof typeof REFUSALS

/** Thrown for every answer of the table; the server turns it into the real service's error shape. */
export class Refused extends Error {
  constructor(readonly refusal: RefusalName, message: string, readonly param?: string) {
    super(message)
    this.name = 'Refused'
  }

  get row(): Refusal {
    return REFUSALS[this.refusal]
  }

  /** The body of the answer in the real service's shape. */
  toBody(): { error: { type: string, message: string, code?: string, param?: string } } {
    const { type, code } = this.row
    return {
      error: {
        ...(code === undefined ? {} : { code }),
        message: this.message,
        ...(this.param === undefined ? {} : { param: this.param }),
        type,
      },
    }
  }
}

/** Refuses by a row of the table. Never returns. */
export function refuse(refusal: RefusalName, message: string, param?: string): never {
  throw new Refused(refusal, message, param)
}
