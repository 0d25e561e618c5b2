import Stripe from 'stripe'
import { describe, expect, it } from 'vitest'
import { hmacHex, signatureHeader } from '#fakes/payments/signature'
import { createPayments, InvalidSignature } from '#server/adapters/payments'

// Source of the first three rows: stripe-node, test/crypto/helpers.ts (key, text and HMAC-SHA256 as printed there).
// Key and body of the last row are from stripe-node's webhook tests; its value was computed apart, with Python's hmac.
const HMAC_ROWS = [
  { key: 'test_secret', text: '', hex: 'f7f9bd47fb987337b5796fdc1fdb9ba221d0d5396814bfcaf9521f43fd8927fd' },
  { key: 'test_secret', text: '{"obj1":"hello","obj2":"world"}', hex: 'bebb1a643997f419b315ddba19e6f5411e1ce7f810ba6d3617ce72823092f363' },
  { key: 'test_secret', text: '\u{1F600}', hex: '837da296d05c4fe31f61d5d7ead035099d9585a5bcde87de952012a78f0b0c43' },
]
const EVENT = {
  secret: 'whsec_test_secret',
  atSeconds: 1_700_000_000,
  body: '{\n  "id": "evt_test_webhook",\n  "object": "event"\n}',
  hex: '4f1cd7feda9826e746b7d482c4badebb657398df1099e1046364f6196a230150',
}
const HEADER = `t=${EVENT.atSeconds},v1=${EVENT.hex}`

// stripe-node, src/Webhooks.ts: age is judged against this moment; 300 s is the tolerance unless another is given.
const NO_TOLERANCE_CHECK = 0
const stripe = new Stripe('sk_test_unused')

function constructs(header: string, options: { secret?: string, receivedAtMs?: number } = {}): string {
  const { secret = EVENT.secret, receivedAtMs } = options
  const tolerance = receivedAtMs === undefined ? NO_TOLERANCE_CHECK : undefined
  return stripe.webhooks.constructEvent(EVENT.body, header, secret, tolerance, undefined, receivedAtMs).id
}

describe('the stand-in\'s own signer, on node:crypto', () => {
  it.each(HMAC_ROWS)('[house.fakes] HMAC-SHA256 of $text under $key is the published value', ({ key, text, hex }) => {
    expect(hmacHex(text, key)).toBe(hex)
    expect(hmacHex(Buffer.from(text, 'utf8'), key)).toBe(hex)
  })

  it('[house.fakes] the header signs "<t>.<raw body>" with the whole secret', () => {
    expect(signatureHeader(EVENT.body, EVENT.secret, EVENT.atSeconds)).toBe(HEADER)
  })

  it('agrees with the SDK\'s own test header for a body beyond ASCII', () => {
    const payload = JSON.stringify({ name: 'Ó Briain – \u{1F3CC}' })
    const expected = stripe.webhooks.generateTestHeaderString({ payload, secret: EVENT.secret, timestamp: EVENT.atSeconds })
    expect(signatureHeader(payload, EVENT.secret, EVENT.atSeconds)).toBe(expected)
  })
})

describe('the SDK\'s constructEvent', () => {
  it.each(HMAC_ROWS)('[house.fakes] its crypto gives the published value for $text', ({ key, text, hex }) => {
    expect(Stripe.createNodeCryptoProvider().computeHMACSignature(text, key)).toBe(hex)
  })

  it('[house.fakes] accepts the reference header', () => {
    expect(constructs(HEADER)).toBe('evt_test_webhook')
  })

  it('accepts when any one of several v1 signatures matches', () => {
    expect(constructs(`t=${EVENT.atSeconds},v1=${'0'.repeat(64)},v1=${EVENT.hex}`)).toBe('evt_test_webhook')
  })

  it.each([
    ['another secret', HEADER, 'whsec_other'],
    ['one changed digit', HEADER.replace('v1=4', 'v1=5'), EVENT.secret],
    ['a moved time', HEADER.replace('t=1700000000', 't=1700000001'), EVENT.secret],
    ['no v1', HEADER.replace('v1=', 'v0='), EVENT.secret],
    ['a time that is not a number', HEADER.replace('1700000000', 'soon'), EVENT.secret],
    ['an empty header', '', EVENT.secret],
  ])('refuses %s', (_name, header, secret) => {
    expect(() => constructs(header, { secret })).toThrow(Stripe.errors.StripeSignatureVerificationError)
  })

  it('takes an age of 300 s and refuses 301 s; a time ahead passes', () => {
    const at = (seconds: number) => ({ receivedAtMs: (EVENT.atSeconds + seconds) * 1000 })
    expect(constructs(HEADER, at(300))).toBe('evt_test_webhook')
    expect(() => constructs(HEADER, at(301))).toThrow('Timestamp outside the tolerance zone')
    expect(constructs(HEADER, at(-3600))).toBe('evt_test_webhook')
  })
})

describe('the adapter', () => {
  const payments = createPayments({ secretKey: 'sk_test_unused', webhookSecret: EVENT.secret, apiBase: undefined })
  const body = JSON.stringify({
    id: 'evt_1', object: 'event', created: 1_700_000_000, type: 'charge.refunded', data: { object: { id: 'ch_1', payment_intent: 'pi_1' } },
  }, null, 2)
  const nowSeconds = Math.floor(Date.now() / 1000)

  it('[house.fakes] reads what the stand-in\'s signer signed, as text and as bytes', () => {
    const header = signatureHeader(body, EVENT.secret, nowSeconds)
    const expected = {
      kind: 'payment-refunded', id: 'evt_1', type: 'charge.refunded', createdAtMs: 1_700_000_000_000, chargeId: 'ch_1', paymentIntentId: 'pi_1',
    }
    expect(payments.readEvent(body, header)).toEqual(expected)
    expect(payments.readEvent(Buffer.from(body), header)).toEqual(expected)
  })

  it.each([
    ['a body written again', JSON.stringify(JSON.parse(body)), signatureHeader(body, EVENT.secret, nowSeconds)],
    ['an old signature', body, signatureHeader(body, EVENT.secret, nowSeconds - 310)],
    ['another secret', body, signatureHeader(body, 'whsec_other', nowSeconds)],
    ['no signature', body, ''],
    ['no body', '', signatureHeader('', EVENT.secret, nowSeconds)],
    ['signed text that is not JSON', 'hello', signatureHeader('hello', EVENT.secret, nowSeconds)],
  ])('throws InvalidSignature for %s', (_name, rawBody, header) => {
    expect(() => payments.readEvent(rawBody, header)).toThrow(InvalidSignature)
  })
})
