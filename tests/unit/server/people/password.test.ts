import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { askForReset, changePassword, resetPassword } from '#server/features/people/password.service'
import { signIn } from '#server/features/people/sign-in.service'
import { findSessionViewer } from '#server/features/sessions/session.repository'
import type { House } from './open-house'
import { ADDRESS, MINUTE_MS, NOW_MS, PASSWORD, openHouse } from './open-house'

let house: House
let joelId: string

beforeEach(async () => {
  house = await openHouse()
  joelId = await house.addPerson({ email: 'joel@northfield.test' })
})
afterEach(() => house.close())

const NEXT = 'an entirely different one'
const email = 'joel@northfield.test'
const gone = { kind: 'gone', code: 'link-used-or-expired' }

async function askForLink(atMs = NOW_MS): Promise<string> {
  await askForReset(await house.ctx({ atMs }), { email, address: ADDRESS })
  const token = (await house.letters(atMs)).filter(({ letter }) => letter === 'forgotten-password').at(-1)?.token
  if (!token) throw new Error('There is no letter with a link.')
  return token
}

async function openSession(): Promise<string> {
  return (await house.signedInCtx(joelId)).viewer.sessionId
}

const isAlive = async (sessionId: string) => await findSessionViewer(house.db, sessionId, NOW_MS) !== undefined

describe('a forgotten password', () => {
  it('answers the same and as late for an address without account, and writes to nobody', async () => {
    const timed = async (address: string) => {
      const startMs = performance.now()
      const answer = await askForReset(await house.ctx(), { email: address, address: ADDRESS })
      return { answer, tookMs: performance.now() - startMs }
    }
    const unknown = await timed('nobody@northfield.test')
    expect(await house.letters()).toEqual([])
    const known = await timed(email)
    expect(unknown.answer).toEqual({ ok: true })
    expect(known.answer).toEqual({ ok: true })
    expect(Math.min(unknown.tookMs, known.tookMs)).toBeGreaterThan(390)
    expect(await house.letters()).toMatchObject([{ letter: 'forgotten-password', to: email }])
  })

  it('is replaced by the link, which signs in and ends every session there was', async () => {
    const sessions = [await openSession(), await openSession()]
    const { viewer, sessionId } = await resetPassword(await house.ctx(), { token: await askForLink(), password: NEXT, address: ADDRESS })
    expect(viewer.id).toBe(joelId)
    expect(await Promise.all(sessions.map(isAlive))).toEqual([false, false])
    expect(await isAlive(sessionId)).toBe(true)
    await expect(signIn(await house.ctx(), { email, password: PASSWORD, address: ADDRESS })).rejects.toMatchObject({ kind: 'not-signed-in' })
    expect((await signIn(await house.ctx(), { email, password: NEXT, address: ADDRESS })).viewer.id).toBe(joelId)
    // 08:15 UTC is 09:15 in London in May.
    expect((await house.letters()).map(({ letter, text }) => [letter, /Tue 19 May, 09:15/.test(text)])).toEqual([['password-changed', true]])
  })

  it('can be replaced once by one link, and by no other link asked for before', async () => {
    const [first, second] = [await askForLink(NOW_MS), await askForLink(NOW_MS + 1)]
    expect(second).not.toBe(first)
    await resetPassword(await house.ctx(), { token: first, password: NEXT, address: ADDRESS })
    for (const token of [first, second]) {
      await expect(resetPassword(await house.ctx(), { token, password: 'a third one here', address: ADDRESS })).rejects.toMatchObject(gone)
    }
  })

  it('signs in again for the very same request, without ending what was begun since', async () => {
    const token = await askForLink()
    const first = await resetPassword(await house.ctx(), { token, password: NEXT, address: ADDRESS })
    const again = await resetPassword(await house.ctx(), { token, password: NEXT, isRepeated: true, address: ADDRESS })
    expect(again.viewer).toEqual(first.viewer)
    expect([await isAlive(first.sessionId), await isAlive(again.sessionId)]).toEqual([true, true])
    expect((await house.letters()).map(({ letter }) => letter)).toEqual(['password-changed'])
  })

  it('has a link of 30 minutes, and nothing changes after it', async () => {
    const token = await askForLink()
    const late = await house.ctx({ atMs: NOW_MS + 30 * MINUTE_MS })
    await expect(resetPassword(late, { token, password: NEXT, address: ADDRESS })).rejects.toMatchObject(gone)
    expect(await signIn(await house.ctx(), { email, password: PASSWORD, address: ADDRESS })).toHaveProperty('sessionId')
    const inTime = await house.ctx({ atMs: NOW_MS + 30 * MINUTE_MS - 1 })
    expect(await resetPassword(inTime, { token, password: NEXT, address: ADDRESS })).toHaveProperty('sessionId')
  })

  it('confirms the address too, since the letter reached it', async () => {
    await house.db.updateTable('users').set({ email_confirmed_at_ms: null }).execute()
    await resetPassword(await house.ctx(), { token: await askForLink(), password: NEXT, address: ADDRESS })
    expect(await house.db.selectFrom('users').select('email_confirmed_at_ms').execute()).toEqual([{ email_confirmed_at_ms: NOW_MS }])
  })

  it('is not helped by a link while the account is suspended', async () => {
    const token = await askForLink()
    await house.db.updateTable('users').set({ suspended_at_ms: NOW_MS }).execute()
    await expect(resetPassword(await house.ctx(), { token, password: NEXT, address: ADDRESS })).rejects.toMatchObject(gone)
    await askForReset(await house.ctx(), { email, address: ADDRESS })
    expect((await house.db.selectFrom('outbox').select('letter').execute())).toHaveLength(1)
  })
})

describe('changing the password', () => {
  it('ends the other sessions, keeps this one, and kills a link that waits', async () => {
    const token = await askForLink()
    const here = await house.signedInCtx(joelId)
    const there = await openSession()
    expect(await changePassword(here, { current: PASSWORD, next: NEXT })).toEqual({ ok: true })
    expect([await isAlive(here.viewer.sessionId), await isAlive(there)]).toEqual([true, false])
    await expect(resetPassword(await house.ctx(), { token, password: 'a third one here', address: ADDRESS })).rejects.toMatchObject(gone)
    expect((await house.letters()).map(({ letter }) => letter)).toEqual(['password-changed'])
  })

  it('needs the present one, and changes nothing without it', async () => {
    const here = await house.signedInCtx(joelId)
    const there = await openSession()
    await expect(changePassword(here, { current: 'wrong', next: NEXT })).rejects.toMatchObject({ kind: 'invalid', fields: { current: expect.any(String) } })
    expect(await isAlive(there)).toBe(true)
    expect(await signIn(await house.ctx(), { email, password: PASSWORD, address: ADDRESS })).toHaveProperty('sessionId')
  })

  it('lets a stolen session guess ten times', async () => {
    const here = await house.signedInCtx(joelId)
    for (let time = 0; time < 10; time++) await here.limits.take('password-account', joelId)
    await expect(changePassword(here, { current: PASSWORD, next: NEXT })).rejects.toMatchObject({ kind: 'too-many' })
  })
})
