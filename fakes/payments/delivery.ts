import type { StoredEvent } from './objects'
import { signatureHeader } from './signature'
import type { Delivery, Store } from './store'

/** About 100 s in all, so that an app under restart or under repair is still reached; the real service takes days. */
export const RETRY_DELAYS_MS: readonly number[] = [200, 400, 800, 1600, 3200, 6400, 12_800, 25_600, 51_200]
const ANSWER_WITHIN_MS = 10_000

export interface DeliveryOptions {
  webhookSecret: string
  retryDelaysMs: readonly number[]
}

export interface DeliveryByHand {
  times: number
  order: 'as-is' | 'reversed' | 'shuffled'
  seed: number
  delayMs: number
  atOnce: boolean
}

export interface DeliveredByHand { eventId: string, type: string, answer: number | string }

/** Sends signed events to the webhook address, again and again until it answers 2xx or the delays run out. */
export class Deliveries {
  private readonly underWay = new Set<string>()
  private readonly timers = new Map<string, NodeJS.Timeout>()
  private stopping = new AbortController()

  constructor(private readonly store: Store, private readonly options: DeliveryOptions) {}

  /** Starts whatever is due. Events go out side by side, as the real service sends them: their order is not promised. */
  kick(): void {
    const { state } = this.store
    if (state.isHolding || state.webhookUrl === null) return
    for (const event of state.events) {
      const delivery = state.deliveries[event.id]
      if (delivery?.state !== 'pending' || this.underWay.has(event.id) || this.timers.has(event.id)) continue
      const waitMs = delivery.nextAtMs - Date.now()
      if (waitMs <= 0) void this.deliverByItself(event)
      else this.timers.set(event.id, setTimeout(() => this.wake(event.id), waitMs))
    }
  }

  private wake(eventId: string): void {
    this.timers.delete(eventId)
    this.kick()
  }

  private async deliverByItself(event: StoredEvent): Promise<void> {
    this.underWay.add(event.id)
    const { signal } = this.stopping
    const answer = await this.send(event)
    this.underWay.delete(event.id)
    // Stopped or reset meanwhile: what came back is about a state that is gone.
    if (signal.aborted) return
    this.note(event, answer, false)
    const delivery = this.store.state.deliveries[event.id]
    if (delivery?.state === 'pending') this.planRetry(delivery)
    this.store.save()
    this.kick()
  }

  private planRetry(delivery: Delivery): void {
    const tries = delivery.attempts.filter(attempt => !attempt.isByHand).length
    const delayMs = this.options.retryDelaysMs[tries - 1]
    if (delayMs === undefined) delivery.state = 'given-up'
    else delivery.nextAtMs = Date.now() + delayMs
  }

  /** Sends the events in a chosen order, `times` rounds of them, and tells what each was answered. */
  async deliverByHand(events: readonly StoredEvent[], how: DeliveryByHand): Promise<DeliveredByHand[]> {
    const rounds = Array.from({ length: how.times }, () => events).flat()
    const ordered = inOrder(rounds, how.order, how.seed)
    await new Promise(resolve => setTimeout(resolve, how.delayMs))
    const sendOne = async (event: StoredEvent) => {
      const answer = await this.send(event)
      this.note(event, answer, true)
      return { eventId: event.id, type: event.type, answer }
    }
    const delivered: DeliveredByHand[] = []
    if (how.atOnce) delivered.push(...await Promise.all(ordered.map(sendOne)))
    else for (const event of ordered) delivered.push(await sendOne(event))
    this.store.save()
    return delivered
  }

  private async send(event: StoredEvent): Promise<number | string> {
    const url = this.store.state.webhookUrl
    if (url === null) return 'no webhook address'
    const body = JSON.stringify(event, null, 2)
    // Signed by the machine's clock even when the stand-in's own is moved: the receiver's SDK judges age by real time.
    const signature = signatureHeader(body, this.options.webhookSecret, Math.floor(Date.now() / 1000))
    try {
      const answer = await fetch(url, {
        method: 'POST',
        headers: { 'Content-Type': 'application/json; charset=utf-8', 'Stripe-Signature': signature, 'User-Agent': 'payments-stand-in' },
        body,
        redirect: 'manual',
        signal: AbortSignal.any([this.stopping.signal, AbortSignal.timeout(ANSWER_WITHIN_MS)]),
      })
      await answer.arrayBuffer()
      return answer.status
    }
    catch (error) {
      return error instanceof Error ? describe(error) : 'failed'
    }
  }

  private note(event: StoredEvent, answer: number | string, isByHand: boolean): void {
    const delivery = this.store.state.deliveries[event.id]
    if (delivery === undefined) return
    delivery.attempts.push({ atMs: Date.now(), answer, isByHand })
    if (typeof answer !== 'number' || answer < 200 || answer > 299) return
    delivery.state = 'delivered'
    event.pending_webhooks = 0
  }

  /** Drops what is under way and planned; `kick` starts afresh from the state. */
  stop(): void {
    this.stopping.abort()
    this.stopping = new AbortController()
    for (const timer of this.timers.values()) clearTimeout(timer)
    this.timers.clear()
  }
}

function describe(error: Error): string {
  const cause = error.cause instanceof Error ? `: ${error.cause.message}` : ''
  return `${error.name}: ${error.message}${cause}`
}

function inOrder(events: StoredEvent[], order: DeliveryByHand['order'], seed: number): StoredEvent[] {
  if (order === 'reversed') return events.toReversed()
  if (order === 'as-is') return events
  const left = [...events]
  const random = seeded(seed)
  const shuffled: StoredEvent[] = []
  while (left.length > 0) shuffled.push(...left.splice(Math.floor(random() * left.length), 1))
  return shuffled
}

// mulberry32: small and good enough to shuffle a handful of events the same way for the same seed.
function seeded(seed: number): () => number {
  let state = seed >>> 0
  return () => {
    state = (state + 0x6D2B79F5) >>> 0
    let mixed = Math.imul(state ^ (state >>> 15), state | 1)
    mixed = (mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61)) ^ mixed
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 2 ** 32
  }
}
