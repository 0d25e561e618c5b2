import { z } from 'zod'

export const FAULT_STAGES = ['connect', 'mail', 'rcpt', 'data', 'before-dot', 'after-dot'] as const

export type FaultStage = typeof FAULT_STAGES[number]

function isPattern(source: string): boolean {
  try {
    return new RegExp(source, 'i').source.length > 0
  }
  catch {
    return false
  }
}

/**
 * Body of `POST /__fake__/fail`.
 *
 * `match` is a regular expression without regard to case, tried on what is known at that moment: nothing
 * (so only a pattern that matches nothing at all) at `connect`, the sender at `mail`, the recipient at `rcpt`,
 * the recipients and the subject at `data`, `before-dot` and `after-dot`.
 *
 * `status` is an answer from 400 to 599, `hang` (no answer ever), `reset` (the connection is cut) or `slow` (the true
 * answer, `delayMs` late). `data` and `before-dot` keep nothing; `after-dot` keeps the message first.
 */
export const faultRequest = z.strictObject({
  match: z.string().max(200).refine(isPattern, 'not a regular expression'),
  times: z.int().min(1).max(1_000_000),
  status: z.union([z.int().min(400).max(599), z.enum(['hang', 'reset', 'slow'])]),
  at: z.enum(FAULT_STAGES),
  delayMs: z.int().min(0).max(60_000).optional(),
}).refine(
  fault => fault.at !== 'before-dot' || typeof fault.status !== 'number',
  'there is no answer before the final dot: use "reset", "hang" or "slow", or at: "data"',
).refine(
  fault => fault.at !== 'connect' || new RegExp(fault.match, 'i').test(''),
  'nothing is known of a connection before it speaks: match must accept the empty text, like ".*"',
).refine(
  fault => fault.status !== 'slow' || fault.delayMs !== undefined,
  'slow needs delayMs',
)

export type Fault = z.infer<typeof faultRequest>

export interface FaultBook {
  add(fault: Fault): void
  /** The first fault that fits, counted down by one; undefined when none does. */
  take(at: FaultStage, texts: readonly string[]): Fault | undefined
  list(): Fault[]
  clear(): void
}

/** Faults ordered by when they were asked for; `times` is what is left. */
export function createFaultBook(): FaultBook {
  let faults: Fault[] = []
  return {
    add: (fault) => {
      faults.push({ ...fault })
    },
    take: (at, texts) => {
      const found = faults.find((fault) => {
        const pattern = new RegExp(fault.match, 'i')
        return fault.at === at && texts.some(text => pattern.test(text))
      })
      if (!found) return undefined
      found.times -= 1
      faults = faults.filter(fault => fault.times > 0)
      return found
    },
    list: () => faults.map(fault => ({ ...fault })),
    clear: () => {
      faults = []
    },
  }
}
