import type { Generated } from 'kysely'

/** People, how they prove who they are, and who answers for whom. The migration of this area holds the checks and indexes. */

export interface StudioTable {
  id: number
  name: string
  time_zone: string
  currency: string
  contact_email: string
  adult_age: Generated<number>
}

export interface UsersTable {
  id: string
  email: string
  email_key: string
  name: string
  role: 'student' | 'guardian' | 'coach' | 'owner'
  time_zone: string
  password_hash: string | null
  email_confirmed_at_ms: number | null
  suspended_at_ms: number | null
  picture_key: string | null
  created_at_ms: number
}

export interface SessionsTable {
  id: string
  user_id: string
  created_at_ms: number
  seen_at_ms: number
  expires_at_ms: number
}

export interface TokensTable {
  id: string
  user_id: string
  purpose: 'confirm' | 'reset'
  token_hash: string
  created_at_ms: number
  expires_at_ms: number
  used_at_ms: number | null
}

export interface InvitesTable {
  id: string
  email: string
  email_key: string
  role: 'coach' | 'owner'
  token_hash: string
  invited_by: string
  created_at_ms: number
  expires_at_ms: number
  accepted_at_ms: number | null
  accepted_by: string | null
}

export interface StudentsTable {
  user_id: string
  birth_date: string
  handedness: 'right' | 'left'
  limits: Generated<string>
  handicap: Generated<string>
  goals: Generated<string>
  /** A JSON list of keys. */
  practice_places: Generated<string>
  sessions_per_week: number | null
  minutes_per_session: number | null
}

export interface ClubsTable {
  student_id: string
  position: number
  club: string
  length_m: number | null
  lie_deg: number | null
  carry_m: number | null
}

export interface CoachesTable {
  user_id: string
  slug: string
  about: Generated<string>
  is_open: Generated<0 | 1>
  share_percent: Generated<number>
}

export interface GuardianshipsTable {
  guardian_id: string
  junior_id: string
  created_at_ms: number
  ended_at_ms: number | null
}

export interface ConsentsTable {
  id: string
  junior_id: string
  guardian_id: string
  text_version: string
  given_at_ms: number
  withdrawn_at_ms: number | null
}

export interface PeopleArea {
  studio: StudioTable
  users: UsersTable
  sessions: SessionsTable
  tokens: TokensTable
  invites: InvitesTable
  students: StudentsTable
  clubs: ClubsTable
  coaches: CoachesTable
  guardianships: GuardianshipsTable
  consents: ConsentsTable
}
