import type { Generated } from 'kysely'

/** Orders, what they moved, and what is to be given back. The migration of this area holds the checks and indexes. */

export interface OrdersTable {
  id: string
  student_id: string | null
  review_id: string | null
  offer_version_id: string
  state: 'open' | 'paid' | 'expired' | 'duplicate'
  amount_minor: number
  currency: string
  quoted_promise_at_ms: number
  quoted_at_ms: number
  checkout_id: string | null
  checkout_url: string | null
  checkout_expires_at_ms: number
  payment_id: string | null
  look_at_ms: number
  created_at_ms: number
  settled_at_ms: number | null
  refunded_minor: Generated<number>
  disputed_at_ms: number | null
}

export interface LedgerEntriesTable {
  id: string
  movement_id: string
  account: 'card' | 'owed' | 'coach' | 'studio'
  amount_minor: number
  currency: string
  reason: 'sale' | 'refund' | 'earned'
  order_id: string
  review_id: string | null
  coach_id: string | null
  at_ms: number
}

export interface RefundsTable {
  id: string
  order_id: string
  amount_minor: number
  reason: 'paid-twice' | 'withdrawn' | 'nothing-to-pay-for'
  state: 'wanted' | 'done' | 'failed'
  attempts: Generated<number>
  due_at_ms: number
  last_reason: string | null
  created_at_ms: number
  done_at_ms: number | null
}

export interface MoneyArea {
  orders: OrdersTable
  ledger_entries: LedgerEntriesTable
  refunds: RefundsTable
}
