import type { Generated } from 'kysely'

/** Letters to send, what was done, what was answered to a repeated request. The migration of this area holds the checks and indexes. */

export interface OutboxTable {
  id: string
  event_key: string
  letter: string
  subject_id: string
  user_id: string | null
  address: string | null
  secret: string | null
  message_id: string
  state: 'waiting' | 'sent' | 'given_up'
  attempts: Generated<number>
  due_at_ms: number
  leased_until_ms: number | null
  last_reason: string | null
  created_at_ms: number
  expires_at_ms: number | null
  sent_at_ms: number | null
}

export interface AuditEventsTable {
  id: string
  at_ms: number
  actor_id: string | null
  deed: string
  subject_id: string | null
  request_id: string | null
}

export interface ViewingsTable {
  id: string
  clip_id: string
  viewer_id: string
  at_ms: number
}

export interface IdempotencyKeysTable {
  scope: string
  key: string
  request_hash: string
  answer: string
  created_at_ms: number
}

export interface RunningArea {
  outbox: OutboxTable
  audit_events: AuditEventsTable
  viewings: ViewingsTable
  idempotency_keys: IdempotencyKeysTable
}
