import type { DemoKey } from '#fakes/demo/people'
import { arrange } from '#tests/support/arrange'
import { call } from '#tests/support/call'
import { answered, saveLetter, startDraft, submitted, takenUp, uploadClip } from '#tests/support/path'
import { sendPhoto } from '#tests/support/photo'
import type { World } from '#tests/support/world'

/** Who asks. `otherGuardian` and `suspended` are made by the test. */
export const WHO = ['nobody', 'student', 'student2', 'junior', 'guardian', 'otherGuardian', 'coach', 'coach2', 'owner', 'suspended'] as const
export type Who = typeof WHO[number]

/** What the cells ask for; one of each, made before the first cell. */
export interface Fixtures {
  world: World
  /** The student's own. */
  draftId: string
  waitingId: string
  waitingClipId: string
  /** The student's, sent to `coach` and in that coach's hands. */
  inHandId: string
  answeredClipId: string
  draftClipId: string
  draftPhotoId: string
  waitingPhotoId: string
  /** The junior's, sent to `coach2`. */
  juniorId: string
  juniorClipId: string
  offerId: string
  studentUserId: string
  juniorUserId: string
  coachUserId: string
}

export interface Row {
  method: string
  /** As the build names it. */
  route: string
  path: (it: Fixtures) => string
  body?: unknown
  /** A fresh address for a cell that will change something, so that no cell depends on another. */
  fresh?: (it: Fixtures, who: Who) => Promise<{ path: string, body?: unknown }>
  expect: Partial<Record<Who, number>> & { others: number }
}

const SIGNED_IN_ONLY = { nobody: 401, suspended: 401 } as const
const PROFILE = { handedness: 'right', handicap: '', limits: '', goals: '', practicePlaces: [], sessionsPerWeek: null, minutesPerSession: null, clubs: [] }
const TOKEN = 'A'.repeat(43)

export const MATRIX: Row[] = [
  { method: 'GET', route: '/health', path: () => '/health', expect: { others: 200 } },
  { method: 'POST', route: '/webhooks/stripe', path: () => '/webhooks/stripe', body: {}, expect: { others: 400 } },

  { method: 'GET', route: '/api/session', path: () => '/api/session', expect: { others: 200 } },
  { method: 'POST', route: '/api/session', path: () => '/api/session', body: { email: 'nobody@demo.turfnote.test', password: 'wrong-password' }, expect: { others: 401 } },
  { method: 'POST', route: '/api/accounts', path: () => '/api/accounts', body: {}, expect: { others: 422 } },
  { method: 'POST', route: '/api/accounts/confirm', path: () => '/api/accounts/confirm', body: { token: TOKEN }, expect: { others: 410 } },
  { method: 'POST', route: '/api/password/forgot', path: () => '/api/password/forgot', body: { email: 'nobody@demo.turfnote.test' }, expect: { others: 202 } },
  { method: 'POST', route: '/api/password/reset', path: () => '/api/password/reset', body: { token: TOKEN, password: 'a-long-enough-one' }, expect: { others: 410 } },
  { method: 'PUT', route: '/api/password', path: () => '/api/password', body: { current: 'wrong-password', next: 'a-long-enough-one' }, expect: { ...SIGNED_IN_ONLY, others: 422 } },
  { method: 'GET', route: '/api/account', path: () => '/api/account', expect: { ...SIGNED_IN_ONLY, others: 200 } },
  { method: 'PATCH', route: '/api/account', path: () => '/api/account', body: {}, expect: { ...SIGNED_IN_ONLY, others: 200 } },
  { method: 'PUT', route: '/api/account/picture', path: () => '/api/account/picture', body: {}, expect: { ...SIGNED_IN_ONLY, others: 400 } },
  { method: 'DELETE', route: '/api/account/picture', path: () => '/api/account/picture', expect: { ...SIGNED_IN_ONLY, others: 200 } },
  // Nobody has a picture yet: for whoever may see the person there is nothing, and for the rest there is no such person.
  { method: 'GET', route: '/api/people/:id/picture', path: it => `/api/people/${it.studentUserId}/picture`, expect: { ...SIGNED_IN_ONLY, others: 404 } },
  { method: 'GET', route: '/api/people', path: () => '/api/people', expect: { ...SIGNED_IN_ONLY, owner: 200, others: 403 } },
  { method: 'GET', route: '/api/invites', path: () => '/api/invites', expect: { ...SIGNED_IN_ONLY, owner: 200, others: 403 } },
  { method: 'POST', route: '/api/invites', path: () => '/api/invites', body: { email: 'new-coach@demo.turfnote.test', role: 'coach' }, expect: { ...SIGNED_IN_ONLY, owner: 200, others: 403 } },
  { method: 'GET', route: '/api/invites/:token', path: () => `/api/invites/${TOKEN}`, expect: { others: 410 } },
  { method: 'POST', route: '/api/invites/:token/accept', path: () => `/api/invites/${TOKEN}/accept`, body: { name: 'New', password: 'a-long-enough-one', timeZone: 'Europe/London' }, expect: { others: 410 } },
  { method: 'GET', route: '/api/coaches', path: () => '/api/coaches', expect: { others: 200 } },
  { method: 'GET', route: '/api/coaches/:slug', path: () => '/api/coaches/mara-lindqvist', expect: { others: 200 } },
  { method: 'GET', route: '/api/profile', path: () => '/api/profile', expect: { ...SIGNED_IN_ONLY, student: 200, student2: 200, junior: 200, others: 403 } },
  { method: 'PUT', route: '/api/profile', path: () => '/api/profile', body: PROFILE, expect: { ...SIGNED_IN_ONLY, student: 200, student2: 200, junior: 200, others: 403 } },

  { method: 'GET', route: '/api/offers', path: () => '/api/offers', expect: { others: 200 } },
  { method: 'GET', route: '/api/offers/:id/promise', path: it => `/api/offers/${it.offerId}/promise`, expect: { others: 200 } },

  { method: 'GET', route: '/api/reviews', path: () => '/api/reviews', expect: { ...SIGNED_IN_ONLY, others: 200 } },
  { method: 'POST', route: '/api/reviews', path: () => '/api/reviews', body: {}, expect: { ...SIGNED_IN_ONLY, student: 201, student2: 201, junior: 201, others: 403 } },
  // A draft is its writer's alone.
  { method: 'GET', route: '/api/reviews/:id', path: it => `/api/reviews/${it.draftId}`, expect: { ...SIGNED_IN_ONLY, student: 200, others: 404 } },
  // Sent to `coach`: the other coach does not see it; the owner does.
  { method: 'GET', route: '/api/reviews/:id', path: it => `/api/reviews/${it.inHandId}`, expect: { ...SIGNED_IN_ONLY, student: 200, coach: 200, owner: 200, others: 404 } },
  // Sent to whoever is free first: every coach sees it.
  { method: 'GET', route: '/api/reviews/:id', path: it => `/api/reviews/${it.waitingId}`, expect: { ...SIGNED_IN_ONLY, student: 200, coach: 200, coach2: 200, owner: 200, others: 404 } },
  // A junior's: guardian too.
  { method: 'GET', route: '/api/reviews/:id', path: it => `/api/reviews/${it.juniorId}`, expect: { ...SIGNED_IN_ONLY, junior: 200, guardian: 200, coach2: 200, owner: 200, others: 404 } },
  { method: 'PATCH', route: '/api/reviews/:id', path: it => `/api/reviews/${it.draftId}`, body: { title: 'Another title' }, expect: { ...SIGNED_IN_ONLY, student: 200, student2: 404, junior: 404, others: 403 } },
  {
    method: 'POST', route: '/api/reviews/:id/clips', path: it => `/api/reviews/${it.draftId}/clips`,
    body: { view: 'face_on', fileName: 'swing.mp4', bytes: 1000, contentType: 'video/mp4' },
    expect: { ...SIGNED_IN_ONLY, student: 201, student2: 404, junior: 404, others: 403 },
  },
  {
    method: 'POST', route: '/api/reviews/:id/submit', path: it => `/api/reviews/${it.draftId}/submit`, body: { payBy: 'credit' },
    // The student's own draft has a clip that is still being sent.
    expect: { ...SIGNED_IN_ONLY, student: 409, student2: 404, junior: 404, others: 403 },
  },
  { method: 'POST', route: '/api/reviews/:id/settle', path: it => `/api/reviews/${it.draftId}/settle`, body: {}, expect: { ...SIGNED_IN_ONLY, student: 200, coach: 403, coach2: 403, owner: 403, others: 404 } },
  {
    method: 'POST', route: '/api/reviews/:id/withdraw', path: it => `/api/reviews/${it.draftId}/withdraw`, body: {},
    fresh: async ({ world }, who) => ({ path: `/api/reviews/${who === 'owner' ? (await submitted(world, 'student')).id : await startDraft(world, 'student')}/withdraw` }),
    // The owner sees no drafts, but may end what was sent.
    expect: { ...SIGNED_IN_ONLY, student: 200, owner: 200, coach: 403, coach2: 403, others: 404 },
  },
  {
    method: 'POST', route: '/api/reviews/:id/take-up', path: it => `/api/reviews/${it.draftId}/take-up`, body: {},
    fresh: async ({ world }) => ({ path: `/api/reviews/${(await submitted(world, 'student')).id}/take-up`, body: {} }),
    expect: { ...SIGNED_IN_ONLY, coach: 200, coach2: 200, others: 403 },
  },
  {
    method: 'POST', route: '/api/reviews/:id/put-back', path: it => `/api/reviews/${it.inHandId}/put-back`, body: {},
    fresh: async ({ world, coachUserId }) => ({ path: `/api/reviews/${(await takenUp(world, 'student', 'coach', { chosenCoachId: coachUserId })).id}/put-back`, body: {} }),
    expect: { ...SIGNED_IN_ONLY, coach: 200, coach2: 404, others: 403 },
  },
  { method: 'GET', route: '/api/reviews/:id/draft', path: it => `/api/reviews/${it.inHandId}/draft`, expect: { ...SIGNED_IN_ONLY, coach: 200, coach2: 404, others: 403 } },
  {
    method: 'PUT', route: '/api/reviews/:id/draft', path: it => `/api/reviews/${it.inHandId}/draft`, body: { version: 0, letter: {} },
    expect: { ...SIGNED_IN_ONLY, coach: 422, coach2: 422, others: 403 },
  },
  {
    method: 'POST', route: '/api/reviews/:id/answer', path: it => `/api/reviews/${it.inHandId}/answer`, body: { version: 1 },
    fresh: async ({ world, coachUserId }) => {
      const { id } = await takenUp(world, 'student', 'coach', { chosenCoachId: coachUserId })
      return { path: `/api/reviews/${id}/answer`, body: { version: await saveLetter(world, 'coach', id) } }
    },
    expect: { ...SIGNED_IN_ONLY, coach: 200, coach2: 404, others: 403 },
  },
  {
    method: 'POST', route: '/api/clips/:id/parts', path: it => `/api/clips/${it.draftClipId}/parts`, body: { numbers: [1] },
    expect: { ...SIGNED_IN_ONLY, student: 200, student2: 404, junior: 404, others: 403 },
  },
  {
    method: 'POST', route: '/api/clips/:id/complete', path: it => `/api/clips/${it.draftClipId}/complete`, body: {},
    fresh: async ({ world }) => {
      const reviewId = await startDraft(world, 'student')
      return { path: `/api/clips/${(await uploadClip(world, 'student', reviewId)).clipId}/complete` }
    },
    expect: { ...SIGNED_IN_ONLY, student: 200, student2: 404, junior: 404, others: 403 },
  },
  {
    method: 'DELETE', route: '/api/clips/:id', path: it => `/api/clips/${it.draftClipId}`,
    fresh: async ({ world }) => {
      const reviewId = await startDraft(world, 'student')
      return { path: `/api/clips/${(await uploadClip(world, 'student', reviewId)).clipId}` }
    },
    expect: { ...SIGNED_IN_ONLY, student: 200, student2: 404, junior: 404, others: 403 },
  },
  {
    method: 'PUT', route: '/api/clips/:id/swings', path: it => `/api/clips/${it.draftClipId}/swings`,
    body: { swings: [{ fromMs: 0, toMs: 1000, contact: 'thin', flight: null, carryM: null, surface: 'mat' }] },
    // The student's own is still being sent.
    expect: { ...SIGNED_IN_ONLY, student: 409, student2: 404, junior: 404, others: 403 },
  },
  {
    method: 'POST', route: '/api/reviews/:id/photos', path: it => `/api/reviews/${it.draftId}/photos?kind=grip`, body: {},
    // Its student is told that this is no form; for everybody else it does not come to that.
    expect: { ...SIGNED_IN_ONLY, student: 400, student2: 404, junior: 404, others: 403 },
  },
  {
    method: 'DELETE', route: '/api/photos/:id', path: it => `/api/photos/${it.draftPhotoId}`,
    expect: { ...SIGNED_IN_ONLY, student: 200, student2: 404, junior: 404, others: 403 },
    fresh: async ({ world }) => {
      const reviewId = await startDraft(world, 'student')
      return { path: `/api/photos/${readId((await sendPhoto(world, reviewId)).body)}` }
    },
  },
  { method: 'GET', route: '/api/photos/:id/picture', path: it => `/api/photos/${it.draftPhotoId}/picture`, expect: { ...SIGNED_IN_ONLY, student: 302, others: 404 } },
  { method: 'GET', route: '/api/photos/:id/picture', path: it => `/api/photos/${it.waitingPhotoId}/picture`, expect: { ...SIGNED_IN_ONLY, student: 302, coach: 302, coach2: 302, owner: 302, others: 404 } },
  { method: 'GET', route: '/api/clips/:id/film', path: it => `/api/clips/${it.waitingClipId}/film`, expect: { ...SIGNED_IN_ONLY, student: 302, coach: 302, coach2: 302, owner: 302, others: 404 } },
  { method: 'GET', route: '/api/clips/:id/film', path: it => `/api/clips/${it.juniorClipId}/film`, expect: { ...SIGNED_IN_ONLY, junior: 302, guardian: 302, coach2: 302, owner: 302, others: 404 } },
  { method: 'GET', route: '/api/desk/queue', path: () => '/api/desk/queue', expect: { ...SIGNED_IN_ONLY, coach: 200, coach2: 200, owner: 200, others: 403 } },
  // Last: whoever signs out here has no session afterwards; the test signs in again for it.
  { method: 'DELETE', route: '/api/session', path: () => '/api/session', expect: { others: 200 } },
]

/** Made once, by the people whose they are. */
export async function makeFixtures(world: World): Promise<Fixtures> {
  const me = async (who: DemoKey): Promise<string> => readId((await call(world, 'GET', '/api/account', { as: who })).body)
  const coachUserId = await me('coach')
  const draftId = await startDraft(world, 'student')
  const waiting = await submitted(world, 'student')
  const inHand = await takenUp(world, 'student', 'coach', { chosenCoachId: coachUserId })
  const done = await answered(world, 'student2', 'coach')
  const junior = await submitted(world, 'junior', { chosenCoachId: await me('coach2') })
  const { clipId: draftClipId } = await uploadClip(world, 'student', draftId)
  const draftPhotoId = readId((await sendPhoto(world, draftId)).body)
  const waitingPhotoId = readId((await sendPhoto(world, draftId)).body)
  // It can only be sent with a draft.
  arrange(world, database => database.prepare('update photos set review_id = ? where id = ?').run(waiting.id, waitingPhotoId))
  const offers: unknown = (await call(world, 'GET', '/api/offers')).body
  return {
    world, draftId, draftClipId, draftPhotoId, waitingPhotoId, coachUserId,
    waitingId: waiting.id, waitingClipId: waiting.clipId,
    inHandId: inHand.id, answeredClipId: done.clipId,
    juniorId: junior.id, juniorClipId: junior.clipId,
    offerId: readId(readFirst(offers)),
    studentUserId: await me('student'), juniorUserId: await me('junior'),
  }
}

function readFirst(list: unknown): unknown {
  return typeof list === 'object' && list !== null && 'items' in list && Array.isArray(list.items) ? list.items[0] : undefined
}

function readId(value: unknown): string {
  if (typeof value === 'object' && value !== null && 'id' in value) return String(value.id)
  throw new Error(`No id in ${JSON.stringify(value)}`)
}
