import type { EventType, StoredEvent } from './objects'
import type { Store } from './store'
import { newId } from './store'

/** The version events are written in; the SDK of this release pins the same one. */
export const API_VERSION = '2026-10-28.endive'

/** Who caused an event: shown in the event, as the real service does. */
export interface Cause {
  requestId: string | null
  idempotencyKey: string | null
}

export const NO_CAUSE: Cause = { requestId: null, idempotencyKey: null }

/** What every action of the stand-in works on. */
export interface World {
  store: Store
  /** Keeps the state and sends what became due. Called once a change is whole, before anyone is told of it. */
  commit: () => void
  /** Where this stand-in answers, without a slash at the end. */
  origin: string
  nowMs: () => number
  nowSeconds: () => number
}

/** Records an event with a copy of the object as it is now; delivery picks it up from the state. */
export function recordEvent(world: World, type: EventType, object: StoredEvent['data']['object'], cause: Cause): void {
  const { state } = world.store
  const event: StoredEvent = {
    id: newId('evt'),
    object: 'event',
    api_version: API_VERSION,
    created: world.nowSeconds(),
    data: { object: structuredClone(object) },
    livemode: false,
    pending_webhooks: 1,
    request: { id: cause.requestId, idempotency_key: cause.idempotencyKey },
    type,
  }
  state.events.push(event)
  state.deliveries[event.id] = { state: 'pending', attempts: [], nextAtMs: 0 }
}
