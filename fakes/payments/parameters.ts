import { z } from 'zod'
import { MINIMUM_CHARGE_MINOR } from './currencies'
import type { FormTree, FormValue } from './form'
import { spellPath } from './form'
import type { RefusalName } from './refusals'
import { refuse } from './refusals'
import { EVENT_TYPES } from './objects'

// A refinement carries the row of the refusal table it stands for; `read` below throws that row.
const by = (refusal: RefusalName, message: string) => ({ error: message, params: { refusal } })

const text = (longest: number) => z.string().refine(
  value => value.length <= longest, by('parameter-too-long', `is longer than ${longest} characters`),
)

const whole = (smallest: number) => z.string()
  .refine(value => /^-?\d+$/.test(value) && Number(value) >= smallest, by('parameter-integer', `must be a whole number of at least ${smallest}`))
  .transform(Number)

const address = text(5000).refine(isWebAddress, by('url-invalid', 'Not a valid URL'))

const email = text(512).refine(value => /^[^\s@]+@[^\s@.]+(?:\.[^\s@.]+)+$/.test(value), by('email-invalid', 'Invalid email address'))

const currency = z.string().refine(
  value => value.toLowerCase() in MINIMUM_CHARGE_MINOR,
  by('currency-unknown', 'is not a currency known here (add it, with its minimum charge, to fakes/payments/currencies.ts)'),
).transform(value => value.toLowerCase())

const metadata = z.record(z.string(), z.string())
  .refine(fitsMetadata, by('metadata-too-large', 'Metadata takes 50 keys, 40 characters a key and 500 a value'))
  .transform(entries => Object.fromEntries(Object.entries(entries).filter(([, value]) => value !== '')))
  .optional()

function listOf<Member extends z.ZodType>(member: Member, longest: number) {
  return z.preprocess(toList, z.array(member).refine(
    list => list.length <= longest, by('parameter-too-long', `has more than ${longest} entries`),
  ))
}

const expand = listOf(z.string(), 20).optional()

const page = {
  limit: whole(1).refine(limit => limit <= 100, by('parameter-integer', 'must be at most 100')).optional(),
  starting_after: z.string().optional(),
  expand,
}

export const createSessionParameters = z.strictObject({
  mode: z.literal('payment'),
  line_items: listOf(z.strictObject({
    price_data: z.strictObject({
      currency,
      product_data: z.strictObject({ name: text(250) }),
      unit_amount: whole(0),
    }),
    quantity: whole(1),
  }), 100),
  success_url: address,
  cancel_url: address.optional(),
  client_reference_id: text(200).optional(),
  customer_email: email.optional(),
  expires_at: whole(0).optional(),
  metadata,
  payment_intent_data: z.strictObject({ metadata }).optional(),
  expand,
})

export const listSessionsParameters = z.strictObject({
  ...page,
  payment_intent: z.string().optional(),
  status: z.enum(['open', 'complete', 'expired']).optional(),
})

export const createRefundParameters = z.strictObject({
  payment_intent: z.string().optional(),
  charge: z.string().optional(),
  amount: whole(1).optional(),
  reason: z.enum(['duplicate', 'fraudulent', 'requested_by_customer']).optional(),
  metadata,
  expand,
})

export const listRefundsParameters = z.strictObject({
  ...page, payment_intent: z.string().optional(), charge: z.string().optional(),
})

export const listEventsParameters = z.strictObject({ ...page, type: z.enum(EVENT_TYPES).optional() })

export const expandOnlyParameters = z.strictObject({ expand })

export type CreateSessionParameters = z.infer<typeof createSessionParameters>
export type CreateRefundParameters = z.infer<typeof createRefundParameters>

/** The parameters by a schema, or the first refusal in the words and with the parameter name the service uses. */
export function readParameters<Schema extends z.ZodType>(schema: Schema, tree: FormTree): z.output<Schema> {
  refuseEmpty(tree, [])
  const result = schema.safeParse(tree)
  if (result.success) return result.data
  for (const issue of result.error.issues) refuseIssue(issue, tree)
  return refuse('parameter-shape', 'The parameters cannot be read.')
}

function refuseIssue(issue: z.core.$ZodIssue, tree: FormTree): never {
  const param = spellPath(issue.path)
  if (issue.code === 'unrecognized_keys') {
    const unknown = spellPath([...issue.path, issue.keys[0] ?? ''])
    return refuse('parameter-unknown', `Received unknown parameter: ${unknown}. If the real service takes it, add it to fakes/payments/parameters.ts.`, unknown)
  }
  if (issue.code === 'custom') {
    const row = issue.params?.['refusal']
    return refuse(isRefusalName(row) ? row : 'parameter-value', `Invalid ${param}: ${issue.message}`, param)
  }
  if (valueAt(tree, issue.path) === undefined) return refuse('parameter-missing', `Missing required param: ${param}.`, param)
  if (issue.code === 'invalid_value') return refuse('parameter-value', `Invalid ${param}: must be one of ${issue.values.map(String).join(', ')}.`, param)
  return refuse('parameter-shape', `Invalid ${param}: ${issue.message}`, param)
}

function isRefusalName(value: unknown): value is RefusalName {
  return typeof value === 'string'
}

function valueAt(tree: FormTree, path: readonly PropertyKey[]): FormValue | undefined {
  let node: FormValue | undefined = tree
  for (const part of path) {
    if (node === undefined || typeof node === 'string') return undefined
    node = node[String(part)]
  }
  return node
}

// The service takes an empty string as "unset this", which nothing here but a metadata entry can be.
function refuseEmpty(value: FormValue, path: string[]): void {
  if (path.at(-2) === 'metadata') return
  if (value === '') {
    const param = spellPath(path)
    refuse('parameter-empty', `You passed an empty string for '${param}'. Leave it out or give it a value.`, param)
  }
  if (typeof value === 'string') return
  for (const [name, child] of Object.entries(value)) refuseEmpty(child, [...path, name])
}

function toList(value: unknown): unknown {
  if (typeof value !== 'object' || value === null) return value
  const keys = Object.keys(value)
  if (!keys.every(key => /^\d+$/.test(key))) return value
  const entries = Object.entries(value).sort(([a], [b]) => Number(a) - Number(b))
  return entries.map(([, entry]) => entry)
}

function isWebAddress(value: string): boolean {
  return URL.canParse(value) && ['http:', 'https:'].includes(new URL(value).protocol)
}

function fitsMetadata(entries: Record<string, string>): boolean {
  const pairs = Object.entries(entries)
  return pairs.length <= 50 && pairs.every(([key, value]) => key.length <= 40 && value.length <= 500)
}
