import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { DEMO_PASSWORD } from '#fakes/demo/people'
import { arrange } from '#tests/support/arrange'
import type { Answer } from '#tests/support/call'
import { call } from '#tests/support/call'
import type { World } from '#tests/support/world'
import { startWorld } from '#tests/support/world'
import { mailsTo, tokenFrom, untilMails } from './inbox'

let world: World

beforeAll(async () => {
  world = await startWorld({ index: 20 })
})
afterAll(() => world.close())

const PASSWORD = 'seven plain words in a row'

function newcomer(email: string) {
  return { name: 'Nora Vale', email, password: PASSWORD, birthDate: '1991-03-14', handedness: 'left', timeZone: 'Europe/Paris' }
}

function cookieOf(answer: Answer): string {
  return answer.headers.getSetCookie().map(cookie => cookie.split(';')[0]).join('; ')
}

const post = (path: string, body: unknown, options: { cookie?: string, key?: string } = {}) => call(world, 'POST', path, { body, ...options })
/** The answer without its moment, which is another each time. */
const whoOf = ({ body }: Answer) => typeof body === 'object' && body !== null && 'viewer' in body ? { viewer: body.viewer } : body
const viewerOf = async (cookie: string) => whoOf(await call(world, 'GET', '/api/session', { cookie }))
const NOBODY = { viewer: null }

async function signedUp(email: string): Promise<string> {
  expect((await post('/api/accounts', newcomer(email))).status).toBe(202)
  const confirmed = await post('/api/accounts/confirm', { token: await tokenFrom(world, email, '/confirm', 1) })
  expect(confirmed.status).toBe(200)
  return cookieOf(confirmed)
}

describe('sign-up over HTTP', () => {
  it('goes from form to letter to a session of one\'s own', async () => {
    const email = 'nora@northfield.test'
    const answer = await post('/api/accounts', newcomer(email))
    expect([answer.status, answer.body]).toEqual([202, { ok: true }])
    expect(answer.headers.getSetCookie()).toEqual([])
    expect((await post('/api/session', { email, password: PASSWORD })).body).toMatchObject({ statusCode: 403, data: { code: 'email-not-confirmed' } })
    const token = await tokenFrom(world, email, '/confirm', 2)
    const confirmed = await post('/api/accounts/confirm', { token })
    expect(confirmed.body).toMatchObject({ viewer: { name: 'Nora Vale', email, role: 'student', creditsLeft: 0 } })
    expect(await viewerOf(cookieOf(confirmed))).toEqual(whoOf(confirmed))
    expect((await post('/api/accounts/confirm', { token })).body).toMatchObject({ statusCode: 410, data: { code: 'link-used-or-expired' } })
  })

  it('answers word for word the same for an address with an account', async () => {
    const fresh = await post('/api/accounts', newcomer('fresh@northfield.test'))
    const known = await post('/api/accounts', newcomer('student@demo.turfnote.test'))
    expect([known.status, known.text]).toEqual([fresh.status, fresh.text])
    expect((await untilMails(world, 'student@demo.turfnote.test', 1)).map(({ subject }) => subject)).toEqual(['You already have an account'])
  })

  it('tells a child that a guardian comes first', async () => {
    const answer = await post('/api/accounts', { ...newcomer('child@northfield.test'), birthDate: '2014-01-01' })
    expect(answer.body).toMatchObject({ statusCode: 422, data: { fields: { birthDate: expect.stringContaining('guardian') } } })
  })

  it('does once what is sent twice with one key, and refuses the key with another body', async () => {
    const email = 'twice@northfield.test'
    const key = randomUUID()
    const first = await post('/api/accounts', newcomer(email), { key })
    const second = await post('/api/accounts', newcomer(email), { key })
    expect([second.status, second.text]).toEqual([first.status, first.text])
    await untilMails(world, email, 1)
    expect(await mailsTo(world, email)).toHaveLength(1)
    expect((await post('/api/accounts', newcomer('other@northfield.test'), { key })).status).toBe(409)
  })

  it('signs in again when the answer to the link was lost and the page sends the same request', async () => {
    const email = 'lost@northfield.test'
    await post('/api/accounts', newcomer(email))
    const token = await tokenFrom(world, email, '/confirm', 1)
    const key = randomUUID()
    const first = await post('/api/accounts/confirm', { token }, { key })
    const again = await post('/api/accounts/confirm', { token }, { key })
    expect([again.status, whoOf(again)]).toEqual([200, whoOf(first)])
    expect(await viewerOf(cookieOf(again))).toEqual(whoOf(first))
    expect((await post('/api/accounts/confirm', { token })).status).toBe(410)
  })

  it('refuses what does not fit, field by field, and a link that is not complete', async () => {
    const answer = await post('/api/accounts', { ...newcomer('no address'), password: 'short', timeZone: 'Mars/Olympus' })
    expect(answer.status).toBe(422)
    expect(answer.body).toMatchObject({ data: { code: 'invalid-fields', fields: { email: expect.any(String), password: expect.any(String), timeZone: expect.any(String) } } })
    expect((await post('/api/accounts/confirm', { token: 'short' })).body).toMatchObject({ statusCode: 422, data: { fields: { token: expect.any(String) } } })
  })
})

describe('sessions over HTTP', () => {
  const joel = { email: 'student@demo.turfnote.test', password: DEMO_PASSWORD }

  it('gives visitors no cookie, and a signed-in person one that scripts and other sites cannot use', async () => {
    const visitor = await call(world, 'GET', '/api/session')
    expect([whoOf(visitor), visitor.headers.getSetCookie()]).toEqual([NOBODY, []])
    const [cookie = ''] = (await post('/api/session', joel)).headers.getSetCookie()
    expect(cookie).toMatch(/^__Host-turfnote-test=/)
    for (const attribute of ['HttpOnly', 'Secure', 'SameSite=Lax', 'Path=/']) expect(cookie).toContain(attribute)
    expect(cookie).not.toMatch(/domain/i)
  })

  it('gives one answer to a wrong password and an unknown address', async () => {
    const answers = await Promise.all([{ ...joel, password: 'wrong' }, { ...joel, email: 'nobody@northfield.test' }].map(body => post('/api/session', body)))
    const shown = answers.map(({ status, text }) => `${status} ${text.replace(/"requestId":"[^"]*"/, '')}`)
    expect(shown[0]).toBe(shown[1])
    expect(answers[0]?.body).toMatchObject({ statusCode: 401, data: { code: 'wrong-email-or-password' } })
  })

  it('ends the session that the browser had when another person signs in there', async () => {
    const former = cookieOf(await post('/api/session', { ...joel, email: 'student3@demo.turfnote.test' }))
    const next = cookieOf(await post('/api/session', joel, { cookie: former }))
    expect(await viewerOf(former)).toEqual(NOBODY)
    expect(await viewerOf(next)).toMatchObject({ viewer: { email: joel.email } })
  })

  it('ends at once on signing out, also for a copy of the cookie', async () => {
    const cookie = cookieOf(await post('/api/session', joel))
    const out = await call(world, 'DELETE', '/api/session', { cookie })
    expect([out.status, out.body]).toEqual([200, { ok: true }])
    expect(await viewerOf(cookie)).toEqual(NOBODY)
    expect((await call(world, 'GET', '/api/account', { cookie })).status).toBe(401)
    expect((await call(world, 'DELETE', '/api/session')).status).toBe(200)
  })

  it('ends at once for a suspended person, who cannot sign in again', async () => {
    const cookie = await signedUp('suspended@northfield.test')
    arrange(world, database => database.prepare('update users set suspended_at_ms = 1 where email = ?').run('suspended@northfield.test'))
    expect(await viewerOf(cookie)).toEqual(NOBODY)
    expect((await post('/api/session', { email: 'suspended@northfield.test', password: PASSWORD })).status).toBe(401)
  })
})

describe('passwords over HTTP', () => {
  it('are replaced by a link, which ends every session there was', async () => {
    const email = 'forgot@northfield.test'
    const before = await signedUp(email)
    expect([(await post('/api/password/forgot', { email })).status, (await post('/api/password/forgot', { email: 'nobody@northfield.test' })).status]).toEqual([202, 202])
    expect(await mailsTo(world, 'nobody@northfield.test')).toEqual([])
    const token = await tokenFrom(world, email, '/reset', 2)
    const reset = await post('/api/password/reset', { token, password: 'another seven words' })
    expect(await viewerOf(before)).toEqual(NOBODY)
    expect(await viewerOf(cookieOf(reset))).toMatchObject({ viewer: { email } })
    expect((await post('/api/password/reset', { token, password: 'a third seven words' })).status).toBe(410)
    expect((await post('/api/session', { email, password: PASSWORD })).status).toBe(401)
    expect((await post('/api/session', { email, password: 'another seven words' })).status).toBe(200)
    expect((await untilMails(world, email, 3)).at(-1)?.subject).toBe('Your password was changed')
  })

  it('are changed by who knows the present one, which ends the other sessions and keeps this one', async () => {
    const email = 'changes@northfield.test'
    const here = await signedUp(email)
    const there = cookieOf(await post('/api/session', { email, password: PASSWORD }))
    const wrong = await call(world, 'PUT', '/api/password', { cookie: here, body: { current: 'wrong', next: 'another seven words' } })
    expect(wrong.body).toMatchObject({ statusCode: 422, data: { fields: { current: expect.any(String) } } })
    expect(await viewerOf(there)).toMatchObject({ viewer: { email } })
    const changed = await call(world, 'PUT', '/api/password', { cookie: here, body: { current: PASSWORD, next: 'another seven words' } })
    expect([changed.status, changed.body]).toEqual([200, { ok: true }])
    expect([await viewerOf(there), await viewerOf(here)]).toEqual([NOBODY, { viewer: expect.objectContaining({ email }) }])
  })
})

describe('the account over HTTP', () => {
  it('changes name and zone, and nothing else that is put into the body', async () => {
    const cookie = await signedUp('account@northfield.test')
    const answer = await call(world, 'PATCH', '/api/account', {
      cookie, body: { name: '<b>Nora</b> \u202e', timeZone: 'Asia/Tokyo', role: 'owner', email: 'owner@demo.turfnote.test', creditsLeft: 9 },
    })
    expect(answer.body).toMatchObject({ name: '<b>Nora</b> \u202e', timeZone: 'Asia/Tokyo', role: 'student', email: 'account@northfield.test', creditsLeft: 0 })
    expect((await call(world, 'GET', '/api/account', { cookie })).body).toEqual(answer.body)
    expect((await call(world, 'PATCH', '/api/account', { cookie, body: { name: ' ' } })).status).toBe(422)
  })
})

describe('invitations over HTTP', () => {
  it('go from the owner to a coach who is signed in', async () => {
    const email = 'coach3@northfield.test'
    const invited = await call(world, 'POST', '/api/invites', { as: 'owner', body: { email, role: 'coach' } })
    expect(invited.body).toMatchObject({ email, role: 'coach', state: 'open' })
    const token = await tokenFrom(world, email, '/invite', 1)
    expect((await call(world, 'GET', `/api/invites/${token}`)).body)
      .toMatchObject({ email, role: 'coach', inviterName: 'Ines Calder', studioName: 'Fieldgate Golf' })
    const accepted = await post(`/api/invites/${token}/accept`, { name: 'Vera Holm', password: PASSWORD, timeZone: 'Europe/Oslo', role: 'owner' })
    expect(await viewerOf(cookieOf(accepted))).toMatchObject({ viewer: { email, role: 'coach', isCoach: true } })
    expect((await call(world, 'GET', `/api/invites/${token}`)).body).toMatchObject({ statusCode: 410, data: { code: 'link-used-or-expired' } })
    expect((await call(world, 'GET', '/api/coaches')).body).toMatchObject({ items: expect.arrayContaining([expect.objectContaining({ slug: 'vera-holm', isOpen: true })]) })
    expect((await call(world, 'POST', '/api/invites', { as: 'owner', body: { email, role: 'coach' } })).body).toMatchObject({ statusCode: 409, data: { code: 'already-has-account' } })
  })

  it('and the lists of people and invitations are the owner\'s alone', async () => {
    for (const path of ['/api/people', '/api/invites']) {
      expect((await call(world, 'GET', path, { as: 'owner' })).status).toBe(200)
      for (const as of ['coach', 'student', 'guardian'] as const) expect((await call(world, 'GET', path, { as })).status).toBe(403)
      expect((await call(world, 'GET', path)).status).toBe(401)
    }
    expect((await call(world, 'POST', '/api/invites', { as: 'coach', body: { email: 'x@northfield.test', role: 'owner' } })).status).toBe(403)
    expect((await call(world, 'GET', '/api/people?cursor=rubbish', { as: 'owner' })).body).toMatchObject({ statusCode: 422, data: { fields: { cursor: expect.any(String) } } })
  })
})
