import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { z } from 'zod'
import { call } from '#tests/support/call'
import { LETTER, answered, idOf, saveLetter, sendClip, startDraft, submitted, takenUp, uploadClip } from '#tests/support/path'
import { arrange, copyAccount, giveCredits } from '#tests/support/arrange'
import { sealSessionCookie } from '#tests/support/seal'
import { messagesTo } from '#tests/support/mail'
import type { World } from '#tests/support/world'
import { startWorld } from '#tests/support/world'

let world: World

const reviewView = z.object({
  state: z.string(),
  version: z.number(),
  coach: z.object({ name: z.string() }).nullable(),
  turnaround: z.object({ status: z.string(), startedAtMs: z.number(), promisedAtMs: z.number(), isLate: z.boolean() }).nullable(),
  letter: z.object({ oneChange: z.string(), saw: z.string() }).nullable(),
  clips: z.array(z.object({ state: z.string(), refusal: z.string().nullable(), framesPerSecond: z.number().nullable() })),
  limits: z.string().nullable(),
  moves: z.array(z.string()),
})

const errorAnswer = z.object({ statusCode: z.number(), statusMessage: z.string(), data: z.object({ code: z.string(), message: z.string(), fields: z.record(z.string(), z.string()).optional() }) })

beforeAll(async () => {
  world = await startWorld({ index: 2 })
  for (const email of ['student@demo.turfnote.test', 'student2@demo.turfnote.test', 'junior@demo.turfnote.test']) giveCredits(world, email, 80)
})

afterAll(() => world.close())

async function readAs(who: 'student' | 'coach' | 'owner', id: string) {
  return reviewView.parse((await call(world, 'GET', `/api/reviews/${id}`, { as: who })).body)
}

describe('the path from question to letter', () => {
  it('spends one credit and starts the clock with a promise in working hours', async () => {
    const creditsBefore = await creditsLeft()
    const { id } = await submitted(world, 'student')
    const review = await readAs('student', id)
    expect(review.state).toBe('waiting')
    expect(review.turnaround?.status).toBe('running')
    expect(await creditsLeft()).toBe(creditsBefore - 1)
    // The studio of the template works 9 to 18 every day in London and promises nine working hours: some time tomorrow.
    const aheadMs = (review.turnaround?.promisedAtMs ?? 0) - (review.turnaround?.startedAtMs ?? 0)
    expect(aheadMs).toBeGreaterThanOrEqual(9 * 3_600_000)
    expect(aheadMs).toBeLessThanOrEqual(33 * 3_600_000)
  })

  it('stops the clock, shows the letter and mails the student once the coach answers', async () => {
    const { id } = await answered(world, 'student', 'coach')
    const review = await readAs('student', id)
    expect(review).toMatchObject({ state: 'answered', turnaround: { status: 'stopped', isLate: false }, letter: { oneChange: LETTER.oneChange } })
    const mail = await messagesTo(world, 'student@demo.turfnote.test', message => message.subject === 'Mara has answered' && message.text.includes(id))
    expect(mail.text).toContain(LETTER.oneChange)
    expect(mail.html).toContain(`${world.url}/reviews/${id}`)
  })

  it('copies the guardian on every letter about a junior', async () => {
    const { id } = await answered(world, 'junior', 'coach')
    for (const address of ['junior@demo.turfnote.test', 'guardian@demo.turfnote.test']) {
      expect((await messagesTo(world, address, message => message.text.includes(id) && message.subject.includes('answered'))).text).toContain(LETTER.oneChange)
    }
  })

  it('refuses to send a letter that lacks a part and names the part', async () => {
    const { id } = await takenUp(world, 'student', 'coach')
    const version = await saveLetter(world, 'coach', id, { ...LETTER, oneChange: '', caution: ' ' })
    const answer = await call(world, 'POST', `/api/reviews/${id}/answer`, { as: 'coach', body: { version } })
    expect(answer.status).toBe(422)
    expect(Object.keys(errorAnswer.parse(answer.body).data.fields ?? {}).sort()).toEqual(['caution', 'oneChange'])
    expect((await readAs('coach', id)).state).toBe('in_hand')
  })

  it('refuses a stale save and overwrites nothing', async () => {
    const { id } = await takenUp(world, 'student', 'coach')
    const version = await saveLetter(world, 'coach', id)
    const stale = await call(world, 'PUT', `/api/reviews/${id}/draft`, { as: 'coach', body: { version: version - 1, letter: { ...LETTER, saw: 'Other' } } })
    expect(stale.status).toBe(409)
    expect(errorAnswer.parse(stale.body).data.code).toBe('draft-changed-elsewhere')
    expect((await call(world, 'GET', `/api/reviews/${id}/draft`, { as: 'coach' })).body).toMatchObject({ version, letter: { saw: LETTER.saw } })
  })

  it('keeps the promise when a review is put back, and lets another coach take it up', async () => {
    const { id } = await takenUp(world, 'student', 'coach')
    const promisedAtMs = (await readAs('coach', id)).turnaround?.promisedAtMs
    expect((await call(world, 'POST', `/api/reviews/${id}/put-back`, { as: 'coach', body: {} })).status).toBe(200)
    expect((await call(world, 'POST', `/api/reviews/${id}/take-up`, { as: 'coach2', body: {} })).status).toBe(200)
    const review = await readAs('owner', id)
    expect(review).toMatchObject({ state: 'in_hand', coach: { name: 'Tomas Abara' } })
    expect(review.turnaround?.promisedAtMs).toBe(promisedAtMs)
  })

  it('does not send a review without film, without words or without a credit', async () => {
    const thin = await startDraft(world, 'student', { title: '', question: '' })
    expect((await call(world, 'POST', `/api/reviews/${thin}/submit`, { as: 'student', body: { payBy: 'credit' } })).status).toBe(422)
    const filmless = await startDraft(world, 'student')
    const noFilm = await call(world, 'POST', `/api/reviews/${filmless}/submit`, { as: 'student', body: { payBy: 'credit' } })
    expect(errorAnswer.parse(noFilm.body)).toMatchObject({ statusCode: 409, data: { code: 'no-clip-yet' } })
    const id = await startDraft(world, 'student3')
    await sendClip(world, 'student3', id)
    arrange(world, database => database.prepare(`update credits set spent_at_ms = 1, spent_review_id = id where student_id = (select id from users where email = 'student3@demo.turfnote.test')`).run())
    const noCredit = await call(world, 'POST', `/api/reviews/${id}/submit`, { as: 'student3', body: { payBy: 'credit' } })
    expect(errorAnswer.parse(noCredit.body)).toMatchObject({ statusCode: 409, data: { code: 'no-credit-left' } })
    expect((await call(world, 'GET', `/api/reviews/${id}`, { as: 'student3' })).body).toMatchObject({ state: 'draft', clips: [{ state: 'accepted' }] })
  })

  it('says why a film is refused and keeps none of it', async () => {
    const id = await startDraft(world, 'student')
    const clip = await sendClip(world, 'student', id, { path: 'tests/support/film/made/with-sound.mp4' })
    expect(clip.body).toMatchObject({ state: 'refused', refusal: 'has-sound' })
    const objects = await storeKeys()
    expect(objects.some(key => key.includes(idOf(clip)))).toBe(false)
    expect((await call(world, 'GET', `/api/clips/${idOf(clip)}/film`, { as: 'student' })).status).toBe(404)
  })

  it('asks for a guardian before film of a junior moves, and again when the consent ends', async () => {
    const id = await startDraft(world, 'junior')
    const clipId = idOf(await sendClip(world, 'junior', id))
    expect((await call(world, 'GET', `/api/clips/${clipId}/film`, { as: 'guardian' })).status).toBe(302)
    arrange(world, database => database.prepare('update consents set withdrawn_at_ms = 1').run())
    try {
      for (const [method, path, body] of [
        ['POST', `/api/reviews/${id}/clips`, { view: 'face_on', fileName: 'a.mp4', bytes: 10, contentType: 'video/mp4' }],
        ['POST', `/api/reviews/${id}/submit`, { payBy: 'credit' }],
        ['GET', `/api/clips/${clipId}/film`, undefined],
      ] as const) {
        const answer = await call(world, method, path, { as: 'junior', body })
        expect([path, answer.status, errorAnswer.parse(answer.body).data.code]).toEqual([path, 403, 'consent-needed'])
      }
    }
    finally {
      arrange(world, database => database.prepare('update consents set withdrawn_at_ms = null').run())
    }
  })

  it('tells the store what is missing and goes on from there', async () => {
    const id = await startDraft(world, 'student')
    const started = await call(world, 'POST', `/api/reviews/${id}/clips`, { as: 'student', body: { view: 'face_on', fileName: 'a.mp4', bytes: 20_000_000, contentType: 'video/mp4' } })
    const { clip, parts, partBytes } = z.object({ clip: z.object({ id: z.string() }), partBytes: z.number(), parts: z.array(z.object({ number: z.number(), url: z.string() })) }).parse(started.body)
    expect(parts.map(part => part.number)).toEqual([1, 2, 3])
    await fetch(parts[1]?.url ?? '', { method: 'PUT', body: new Uint8Array(partBytes) })
    expect((await call(world, 'POST', `/api/clips/${clip.id}/parts`, { as: 'student', body: { numbers: [1, 3] } })).body)
      .toMatchObject({ done: [2], parts: [{ number: 1 }, { number: 3 }] })
    const early = await call(world, 'POST', `/api/clips/${clip.id}/complete`, { as: 'student', body: {} })
    expect(errorAnswer.parse(early.body)).toMatchObject({ statusCode: 409, data: { code: 'parts-missing' } })
  })
})

describe('[house.3] a repeated POST', () => {
  it('[house.3] gives the stored answer and changes nothing a second time', async () => {
    const creditsBefore = await creditsLeft()
    const id = await startDraft(world, 'student')
    await sendClip(world, 'student', id)
    const key = 'the-very-same-key-1'
    const first = await call(world, 'POST', `/api/reviews/${id}/submit`, { as: 'student', body: { payBy: 'credit' }, key })
    const second = await call(world, 'POST', `/api/reviews/${id}/submit`, { as: 'student', body: { payBy: 'credit' }, key })
    expect(second.status).toBe(200)
    expect(second.body).toEqual(first.body)
    expect(await creditsLeft()).toBe(creditsBefore - 1)
  })

  it('[house.3] with another body is refused', async () => {
    const key = 'the-very-same-key-2'
    expect((await call(world, 'POST', '/api/reviews', { as: 'student', body: { title: 'One' }, key })).status).toBe(201)
    const other = await call(world, 'POST', '/api/reviews', { as: 'student', body: { title: 'Two' }, key })
    expect(errorAnswer.parse(other.body)).toMatchObject({ statusCode: 409, data: { code: 'key-used-before' } })
  })

  it('[house.3] is another request when another person sends it', async () => {
    const key = 'the-very-same-key-3'
    const mine = idOf(await call(world, 'POST', '/api/reviews', { as: 'student', body: {}, key }))
    const theirs = idOf(await call(world, 'POST', '/api/reviews', { as: 'student2', body: {}, key }))
    expect(theirs).not.toBe(mine)
  })

  it('[house.3] sent eight times at once is carried out once', async () => {
    const before = await reviewCount()
    const answers = await Promise.all(Array.from({ length: 8 }, () => call(world, 'POST', '/api/reviews', { as: 'student', body: { title: 'Once' }, key: 'eight-at-once' })))
    expect(new Set(answers.map(idOf)).size).toBe(1)
    expect(answers.every(answer => answer.status === 201)).toBe(true)
    expect(await reviewCount()).toBe(before + 1)
  })

  it('[house.3] of every kind on the path answers the same twice', async () => {
    const twice = async (path: string, as: 'student' | 'coach', body: unknown) => {
      const key = `twice ${path}`.replaceAll(' ', '-')
      const first = await call(world, 'POST', path, { as, body, key })
      const second = await call(world, 'POST', path, { as, body, key })
      expect([path, second.status, second.body]).toEqual([path, first.status, first.body])
      expect(first.status).toBeLessThan(300)
      return first
    }
    const id = await startDraft(world, 'student')
    await twice(`/api/reviews/${id}/clips`, 'student', { view: 'down_the_line', fileName: 'b.mp4', bytes: 1000, contentType: 'video/mp4' })
    arrange(world, database => database.prepare('delete from clips where review_id = ?').run(id))
    const { clipId } = await uploadClip(world, 'student', id)
    await twice(`/api/clips/${clipId}/complete`, 'student', {})
    await twice(`/api/reviews/${id}/submit`, 'student', { payBy: 'credit' })
    await twice(`/api/reviews/${id}/take-up`, 'coach', {})
    await twice(`/api/reviews/${id}/put-back`, 'coach', {})
    await call(world, 'POST', `/api/reviews/${id}/take-up`, { as: 'coach', body: {} })
    await twice(`/api/reviews/${id}/answer`, 'coach', { version: await saveLetter(world, 'coach', id) })
    await expect.poll(() => answeredLetters(id), { timeout: 10_000 }).toBe(1)
  })
})

describe('[house.4] taking up', () => {
  it('[house.4] by 50 coaches at once gives one of them the review and tells the others who has it', async () => {
    const cookies = await Promise.all(Array.from({ length: 50 }, (_, index) => coachCookie(index)))
    const { id } = await submitted(world, 'student')
    const answers = await Promise.all(cookies.map(cookie => call(world, 'POST', `/api/reviews/${id}/take-up`, { cookie, body: {} })))
    expect(answers.filter(answer => answer.status === 200)).toHaveLength(1)
    const winner = (await readAs('owner', id)).coach?.name ?? 'nobody'
    for (const answer of answers.filter(answer => answer.status !== 200)) {
      expect(errorAnswer.parse(answer.body)).toMatchObject({ statusCode: 409, data: { code: 'already-in-hand', message: expect.stringContaining(winner) } })
    }
  })
})

/** A session row and its cookie without the cost of a password: signing in is tested elsewhere. */
async function coachCookie(index: number): Promise<string> {
  const email = `coach-${index}@demo.turfnote.test`
  const userId = copyAccount(world, { from: 'coach@demo.turfnote.test', email, name: `Coach Number ${index}` })
  return sealedSessionOf(userId)
}

async function sealedSessionOf(userId: string): Promise<string> {
  const sessionId = crypto.randomUUID()
  arrange(world, database => database.prepare('insert into sessions (id, user_id, created_at_ms, seen_at_ms, expires_at_ms) values (?, ?, ?, ?, ?)')
    .run(sessionId, userId, Date.now(), Date.now(), Date.now() + 3_600_000))
  return sealSessionCookie(world.environment, sessionId)
}

async function creditsLeft(): Promise<number> {
  return z.object({ creditsLeft: z.number() }).parse((await call(world, 'GET', '/api/account', { as: 'student' })).body).creditsLeft
}

async function reviewCount(): Promise<number> {
  return arrange(world, database => z.object({ n: z.number() }).parse(database.prepare('select count(*) as n from reviews').get()).n)
}

function answeredLetters(reviewId: string): number {
  return arrange(world, database => z.object({ n: z.number() }).parse(database.prepare(
    'select count(*) as n from outbox where letter = \'answered\' and state = \'sent\' and subject_id in (select id from diagnoses where review_id = ?)',
  ).get(reviewId)).n)
}

async function storeKeys(): Promise<string[]> {
  const state: unknown = await (await fetch(`${world.standIns.storageUrl}/__fake__/state`)).json()
  return z.object({ objects: z.array(z.object({ key: z.string() })) }).parse(state).objects.map(object => object.key)
}
