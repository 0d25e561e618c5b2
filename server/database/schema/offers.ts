import type { Generated } from 'kysely'

/** What is sold, and reviews paid for in advance. The migration of this area holds the checks and indexes. */

export interface OffersTable {
  id: string
  kind: 'single' | 'series'
  is_sold: Generated<0 | 1>
  sort_order: Generated<number>
}

export interface OfferVersionsTable {
  id: string
  offer_id: string
  version: number
  name: string
  review_count: number
  price_minor: number
  currency: string
  turnaround_ms: number
  follow_ups_included: number
  created_at_ms: number
}

export interface CreditsTable {
  id: string
  student_id: string
  offer_version_id: string
  granted_at_ms: number
  spent_at_ms: number | null
  spent_review_id: string | null
  order_id: string | null
  value_minor: Generated<number>
}

export interface ProviderEventsTable {
  id: string
  type: string
  object_id: string
  created_at_ms: number
  received_at_ms: number
}

export interface OffersArea {
  offers: OffersTable
  offer_versions: OfferVersionsTable
  credits: CreditsTable
  provider_events: ProviderEventsTable
}
