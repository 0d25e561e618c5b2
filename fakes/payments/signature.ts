import { createHmac } from 'node:crypto'

/** HMAC-SHA256 in lower-case hex; the whole secret, `whsec_` included, is the key. */
export function hmacHex(content: string | Buffer, secret: string): string {
  return createHmac('sha256', secret).update(content).digest('hex')
}

/**
 * The `Stripe-Signature` header for a raw body: `t=<unix seconds>,v1=<hex>` over `<t>.<body>`
 * (source: stripe-node, src/Webhooks.ts).
 */
export function signatureHeader(rawBody: string, secret: string, atSeconds: number): string {
  return `t=${atSeconds},v1=${hmacHex(`${atSeconds}.${rawBody}`, secret)}`
}
