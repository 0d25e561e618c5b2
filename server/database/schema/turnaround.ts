/** Working hours as they were at each time, and the promises made on them. The migration of this area holds the checks and indexes. */

export interface CalendarsTable {
  id: string
  coach_id: string | null
  version: number
  time_zone: string
  weekly: string
  time_off: string
  created_at_ms: number
}

export interface TurnaroundsTable {
  id: string
  review_id: string
  kind: 'answer' | 'follow_up' | 'check_in'
  sequence: number
  status: 'running' | 'paused' | 'stopped'
  calendar_id: string
  turnaround_ms: number
  started_at_ms: number
  promised_at_ms: number
  stopped_at_ms: number | null
}

export interface TurnaroundEventsTable {
  id: string
  turnaround_id: string
  kind: 'started' | 'paused' | 'resumed' | 'stopped' | 'missed' | 'coach-changed'
  at_ms: number
  calendar_id: string
  promised_at_ms: number
  actor_id: string | null
}

export interface TurnaroundArea {
  calendars: CalendarsTable
  turnarounds: TurnaroundsTable
  turnaround_events: TurnaroundEventsTable
}
