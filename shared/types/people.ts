/** Who a person is to the studio. One account has one role; an owner may also coach. */
export type Role = 'student' | 'guardian' | 'coach' | 'owner'

/** The signed-in person, as `GET /api/session` tells it. */
export interface Viewer {
  id: string
  name: string
  email: string
  role: Role
  /** True for coaches, and for owners who also answer reviews. */
  isCoach: boolean
  /** IANA name; every time shown to this person is in this zone. */
  timeZone: string
  hasPicture: boolean
  /** Reviews already paid for and not yet used. Students and guardians only, else 0. */
  creditsLeft: number
}

/** `GET /api/session`: `viewer` is null for a visitor. */
export interface SessionAnswer {
  viewer: Viewer | null
  /** The server's moment: screens count from it, since a phone's clock may be wrong. */
  nowMs: number
}

/** A person as others may see them. */
export interface PersonBrief {
  id: string
  name: string
  hasPicture: boolean
}

/** `GET /api/coaches`: coaches who take reviews. */
export interface CoachBrief extends PersonBrief {
  slug: string
  isOpen: boolean
  /** One line in the coach's own words. */
  about: string
}

export interface CoachList {
  items: CoachBrief[]
}

/** `GET /api/invites/:token`: what the invitation says, before anything is typed. */
export interface InviteView {
  email: string
  role: 'coach' | 'owner'
  inviterName: string
  studioName: string
  expiresAtMs: number
}

/** `GET /api/invites`: open and used invitations, newest first. */
export interface InviteRow {
  id: string
  email: string
  role: 'coach' | 'owner'
  state: 'open' | 'accepted' | 'expired'
  createdAtMs: number
  expiresAtMs: number
}

export interface PersonRow extends PersonBrief {
  email: string
  role: Role
  isSuspended: boolean
  createdAtMs: number
}
