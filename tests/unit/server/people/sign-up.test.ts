import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { limitKey } from '#server/features/people/email-key'
import { confirmAddress, signUp } from '#server/features/people/sign-up.service'
import { signIn } from '#server/features/people/sign-in.service'
import { findSessionViewer } from '#server/features/sessions/session.repository'
import type { House } from './open-house'
import { ADDRESS, DAY_MS, NOW_MS, PASSWORD, openHouse } from './open-house'

let house: House

beforeEach(async () => {
  house = await openHouse()
})
afterEach(() => house.close())

const input = {
  name: 'Joel Okafor',
  email: 'Joel@northfield.test',
  password: PASSWORD,
  birthDate: '1990-04-03',
  handedness: 'left' as const,
  timeZone: 'Europe/London',
  address: ADDRESS,
}

const gone = { kind: 'gone', code: 'link-used-or-expired' }

async function linkOf(letter: string, atMs = NOW_MS): Promise<string> {
  const token = (await house.letters(atMs)).filter(found => found.letter === letter).at(-1)?.token
  if (!token) throw new Error(`There is no letter ${letter} with a link.`)
  return token
}

describe('signing up', () => {
  it('makes a student who is confirmed and signed in by the link of the letter', async () => {
    expect(await signUp(await house.ctx(), input)).toEqual({ ok: true })
    const [letter] = await house.letters()
    expect(letter).toMatchObject({ letter: 'confirm-address', to: 'Joel@northfield.test' })
    // 24 hours on, in London, which is an hour ahead of 08:15 UTC in May.
    expect(letter?.text).toContain('Wed 20 May, 09:15')
    expect(letter?.text).toContain(`https://lessons.northfield.test/confirm?token=${letter?.token}`)

    const { viewer, sessionId } = await confirmAddress(await house.ctx(), { token: await linkOf('confirm-address'), address: ADDRESS })
    expect(viewer).toMatchObject({ name: 'Joel Okafor', role: 'student', isCoach: false, hasPicture: false, creditsLeft: 0, timeZone: 'Europe/London' })
    expect(await findSessionViewer(house.db, sessionId, NOW_MS)).toMatchObject({ user_id: viewer.id })
    expect(await house.db.selectFrom('students').selectAll().execute())
      .toMatchObject([{ user_id: viewer.id, birth_date: '1990-04-03', handedness: 'left', limits: '' }])
  })

  it('keeps neither the password nor the secret of the link where the file could tell them', async () => {
    await signUp(await house.ctx(), input)
    const token = await linkOf('confirm-address')
    const rows = JSON.stringify([
      await house.db.selectFrom('users').selectAll().execute(),
      await house.db.selectFrom('tokens').selectAll().execute(),
      await house.db.selectFrom('audit_events').selectAll().execute(),
    ])
    expect(rows).not.toContain(PASSWORD)
    expect(rows).not.toContain(token)
  })

  it('answers the same for an address with an account, changes nothing, and writes to its holder', async () => {
    const id = await house.addPerson({ email: 'joel@northfield.test', name: 'Joel O.' })
    expect(await signUp(await house.ctx(), { ...input, password: 'the password of a stranger' })).toEqual({ ok: true })
    expect(await house.letters()).toMatchObject([{ letter: 'address-already-known', to: 'joel@northfield.test' }])
    const users = await house.db.selectFrom('users').select(['id', 'name', 'email']).execute()
    expect(users).toEqual([{ id, name: 'Joel O.', email: 'joel@northfield.test' }])
    await expect(signIn(await house.ctx(), { ...input, password: 'the password of a stranger' })).rejects.toMatchObject({ code: 'wrong-email-or-password' })
  })

  it('lets a later sign-up take the place of one that nobody confirmed, so that a stranger\'s password is not confirmed', async () => {
    await signUp(await house.ctx(), { ...input, password: 'the password of a stranger' })
    const strangersLink = await linkOf('confirm-address')
    await signUp(await house.ctx(), input)
    await expect(confirmAddress(await house.ctx(), { token: strangersLink, address: ADDRESS })).rejects.toMatchObject(gone)
    await confirmAddress(await house.ctx(), { token: await linkOf('confirm-address'), address: ADDRESS })
    await expect(signIn(await house.ctx(), { ...input, password: 'the password of a stranger' })).rejects.toMatchObject({ kind: 'not-signed-in' })
    expect((await signIn(await house.ctx(), input)).viewer.name).toBe('Joel Okafor')
  })

  it.each([
    ['18 tomorrow in London', '2008-05-20', 'Europe/London', /guardian/],
    ['a child', '2016-01-01', 'Europe/London', /guardian/],
    ['18 today in London, but not yet in Honolulu, where it is still the 18th', '2008-05-19', 'Pacific/Honolulu', /guardian/],
    ['not born yet', '2026-05-20', 'Europe/London', /still to come/],
    ['born long ago', '1890-05-20', 'Europe/London', /too long ago/],
  ])('refuses who is %s', async (_who, birthDate, timeZone, words) => {
    await expect(signUp(await house.ctx(), { ...input, birthDate, timeZone }))
      .rejects.toMatchObject({ kind: 'invalid', fields: { birthDate: expect.stringMatching(words) } })
    expect(await house.db.selectFrom('users').selectAll().execute()).toEqual([])
  })

  it('takes who is 18 today, and asks the studio for its age', async () => {
    expect(await signUp(await house.ctx(), { ...input, birthDate: '2008-05-19' })).toEqual({ ok: true })
    await house.db.updateTable('studio').set({ adult_age: 21 }).execute()
    await expect(signUp(await house.ctx(), { ...input, birthDate: '2008-05-19' })).rejects.toMatchObject({ kind: 'invalid' })
  })

  it('sends five letters an hour to one address, and no more', async () => {
    const ctx = await house.ctx()
    for (let time = 0; time < 4; time++) await ctx.limits.take('mail-account', limitKey(ctx, input.email))
    expect(await signUp(ctx, input)).toEqual({ ok: true })
    await expect(signUp(await house.ctx(), { ...input, address: '198.51.100.1' })).rejects.toMatchObject({ kind: 'too-many' })
    expect(await house.letters()).toHaveLength(1)
  })
})

describe('the link that confirms', () => {
  beforeEach(async () => {
    await signUp(await house.ctx(), input)
  })

  it('works once', async () => {
    const token = await linkOf('confirm-address')
    await confirmAddress(await house.ctx(), { token, address: ADDRESS })
    await expect(confirmAddress(await house.ctx(), { token, address: ADDRESS })).rejects.toMatchObject(gone)
  })

  it('works again for ten minutes for the very same request, and signs in once more', async () => {
    const token = await linkOf('confirm-address')
    const first = await confirmAddress(await house.ctx(), { token, address: ADDRESS })
    const again = await confirmAddress(await house.ctx({ atMs: NOW_MS + 9 * 60_000 }), { token, isRepeated: true, address: ADDRESS })
    expect(again.viewer).toEqual(first.viewer)
    await expect(confirmAddress(await house.ctx({ atMs: NOW_MS + 10 * 60_000 }), { token, isRepeated: true, address: ADDRESS }))
      .rejects.toMatchObject(gone)
  })

  it('works for 24 hours', async () => {
    const token = await linkOf('confirm-address')
    await expect(confirmAddress(await house.ctx({ atMs: NOW_MS + DAY_MS }), { token, address: ADDRESS })).rejects.toMatchObject(gone)
    expect(await confirmAddress(await house.ctx({ atMs: NOW_MS + DAY_MS - 1 }), { token, address: ADDRESS })).toHaveProperty('sessionId')
  })

  it('is not a link for another purpose, nor any other text', async () => {
    await expect(confirmAddress(await house.ctx(), { token: 'A'.repeat(43), address: ADDRESS })).rejects.toMatchObject(gone)
  })

  it('leaves the other links of the account dead, and their letters unsent', async () => {
    await expect(signIn(await house.ctx(), input)).rejects.toMatchObject({ code: 'email-not-confirmed' })
    const letters = await house.letters()
    expect(letters.map(({ letter }) => letter)).toEqual(['confirm-address', 'confirm-address'])
    await confirmAddress(await house.ctx(), { token: letters[0]?.token ?? '', address: ADDRESS })
    await expect(confirmAddress(await house.ctx(), { token: letters[1]?.token ?? '', address: ADDRESS })).rejects.toMatchObject(gone)
    expect(await house.letters()).toEqual([])
  })

  it('opens nothing once the account is suspended', async () => {
    const token = await linkOf('confirm-address')
    await house.db.updateTable('users').set({ suspended_at_ms: NOW_MS }).execute()
    await expect(confirmAddress(await house.ctx(), { token, address: ADDRESS })).rejects.toMatchObject(gone)
  })
})
