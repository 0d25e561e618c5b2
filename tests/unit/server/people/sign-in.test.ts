import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { limitKey } from '#server/features/people/email-key'
import { hashPassword } from '#server/features/people/passwords/password-hash'
import { signIn, signOut } from '#server/features/people/sign-in.service'
import { findSessionViewer } from '#server/features/sessions/session.repository'
import type { House } from './open-house'
import { ADDRESS, DAY_MS, NOW_MS, PASSWORD, openHouse } from './open-house'

let house: House
let joelId: string

beforeEach(async () => {
  house = await openHouse()
  joelId = await house.addPerson({ email: 'joel@northfield.test' })
})
afterEach(() => house.close())

const input = { email: 'JOEL@northfield.test', password: PASSWORD, address: ADDRESS }
const refused = { kind: 'not-signed-in', code: 'wrong-email-or-password' }

describe('signing in', () => {
  it('opens a session of 30 days', async () => {
    const { viewer, sessionId } = await signIn(await house.ctx(), input)
    expect(viewer).toMatchObject({ id: joelId, role: 'student' })
    expect(await findSessionViewer(house.db, sessionId, NOW_MS + 30 * DAY_MS - 1)).toMatchObject({ user_id: joelId })
    expect(await findSessionViewer(house.db, sessionId, NOW_MS + 30 * DAY_MS)).toBeUndefined()
  })

  it('gives one answer for a wrong password, an unknown address, an account without password and a suspended one', async () => {
    await house.addPerson({ email: 'new@northfield.test', hasPassword: false })
    const gone = await house.addPerson({ email: 'gone@northfield.test' })
    await house.db.updateTable('users').set({ suspended_at_ms: NOW_MS }).where('id', '=', gone).execute()
    const errors = []
    for (const wrong of [{ password: 'wrong' }, { email: 'nobody@northfield.test' }, { email: 'new@northfield.test' }, { email: 'gone@northfield.test' }]) {
      errors.push(await signIn(await house.ctx(), { ...input, ...wrong }).catch((error: unknown) => error))
    }
    for (const error of errors) expect(error).toMatchObject(refused)
    expect(new Set(errors.map(error => error instanceof Error && error.message)).size).toBe(1)
    expect(await house.db.selectFrom('sessions').selectAll().execute()).toEqual([])
  })

  it('tells only who knows the password that the address is not confirmed, and sends the link again', async () => {
    await house.addPerson({ email: 'new@northfield.test', isUnconfirmed: true })
    await expect(signIn(await house.ctx(), { ...input, email: 'new@northfield.test', password: 'wrong' })).rejects.toMatchObject(refused)
    expect(await house.letters()).toEqual([])
    await expect(signIn(await house.ctx(), { ...input, email: 'new@northfield.test' }))
      .rejects.toMatchObject({ kind: 'not-allowed', code: 'email-not-confirmed' })
    expect(await house.letters()).toMatchObject([{ letter: 'confirm-address', to: 'new@northfield.test' }])
  })

  it('ends the session that the browser had, whoever\'s it was', async () => {
    const mara = await house.addPerson({ email: 'mara@northfield.test', role: 'coach' })
    const { viewer: { sessionId: former } } = await house.signedInCtx(mara)
    const { sessionId } = await signIn(await house.ctx({ sessionId: former }), input)
    expect(sessionId).not.toBe(former)
    expect(await findSessionViewer(house.db, former, NOW_MS)).toBeUndefined()
    expect(await findSessionViewer(house.db, sessionId, NOW_MS)).toMatchObject({ user_id: joelId })
  })

  it('makes a hash that was made with less work anew, and only then', async () => {
    await house.db.updateTable('users').set({ password_hash: await hashPassword(PASSWORD, { logN: 10, r: 8, p: 1 }) }).execute()
    const readHash = async () => (await house.db.selectFrom('users').select('password_hash').executeTakeFirstOrThrow()).password_hash
    await signIn(await house.ctx(), input)
    const renewed = await readHash()
    expect(renewed).toMatch(/^\$scrypt\$ln=17,/)
    await signIn(await house.ctx(), input)
    expect(await readHash()).toBe(renewed)
  })

  it('lets nobody in by a password that was changed while it was hashed', async () => {
    const changed = house.db.updateTable('users').set({ password_hash: await hashPassword('another', { logN: 10, r: 8, p: 1 }) })
    const attempt = signIn(await house.ctx(), input)
    // By then it has read the account and hashes; reading is a matter of microtasks, hashing of a thread.
    await new Promise(resolve => setTimeout(resolve, 20))
    await changed.execute()
    await expect(attempt).rejects.toMatchObject(refused)
    expect(await house.db.selectFrom('sessions').selectAll().execute()).toEqual([])
  })

  it('slows guessing at one account from one place, without locking the owner out of another', async () => {
    const take = async (address: string) => (await house.ctx()).limits.take('sign-in-account-address', `${limitKey(await house.ctx(), 'mara@northfield.test')} ${address}`)
    for (let time = 0; time < 8; time++) await take(ADDRESS)
    await expect(signIn(await house.ctx(), { ...input, email: 'MARA@northfield.test' }))
      .rejects.toMatchObject({ kind: 'too-many', retryAfterSeconds: expect.any(Number) })
    await expect(signIn(await house.ctx(), { ...input, email: 'mara@northfield.test', address: '198.51.100.1' })).rejects.toMatchObject(refused)
    expect(await signIn(await house.ctx(), input)).toHaveProperty('sessionId')
  })

  it('slows guessing at many accounts from one place', async () => {
    const ctx = await house.ctx()
    for (let time = 0; time < 30; time++) await ctx.limits.take('sign-in-address', ADDRESS)
    await expect(signIn(ctx, input)).rejects.toMatchObject({ kind: 'too-many' })
  })
})

describe('signing out', () => {
  it('ends this session and no other', async () => {
    const here = await house.signedInCtx(joelId)
    const there = await house.signedInCtx(joelId)
    await signOut(here)
    expect(await findSessionViewer(house.db, here.viewer.sessionId, NOW_MS)).toBeUndefined()
    expect(await findSessionViewer(house.db, there.viewer.sessionId, NOW_MS)).toBeDefined()
  })

  it('is no error for a visitor', async () => {
    await expect(signOut(await house.ctx())).resolves.toBeUndefined()
  })
})
