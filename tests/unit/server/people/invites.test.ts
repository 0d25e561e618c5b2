import { CompiledQuery } from 'kysely'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import type { SignedInCtx } from '#server/context'
import { acceptInvite } from '#server/features/people/accept-invite.service'
import { invite, listAllInvites, readInvite } from '#server/features/people/invite.service'
import { listPeople, listStudioCoaches } from '#server/features/people/people.service'
import type { House } from './open-house'
import { ADDRESS, DAY_MS, NOW_MS, PASSWORD, openHouse } from './open-house'

let house: House
let ownerId: string
let owner: SignedInCtx

beforeEach(async () => {
  house = await openHouse()
  ownerId = await house.addPerson({ email: 'ines@northfield.test', role: 'owner', name: 'Ines Carvalho' })
  owner = await house.signedInCtx(ownerId)
})
afterEach(() => house.close())

const email = 'mara@northfield.test'
const mara = { name: 'Mara Lindqvist', password: PASSWORD, timeZone: 'Europe/Stockholm', address: ADDRESS }
const gone = { kind: 'gone', code: 'link-used-or-expired' }

async function linkTo(address: string): Promise<string> {
  const token = (await house.letters()).find(({ to }) => to === address)?.token
  if (!token) throw new Error(`There is no letter to ${address}.`)
  return token
}

describe('an invitation', () => {
  it('is a letter with a link, and what the link says', async () => {
    const row = await invite(owner, { email, role: 'coach' })
    expect(row).toMatchObject({ email, role: 'coach', state: 'open', createdAtMs: NOW_MS, expiresAtMs: NOW_MS + 7 * DAY_MS })
    const [letter] = await house.letters()
    expect(letter).toMatchObject({ letter: 'invitation', to: email, subject: 'Ines Carvalho invites you to Northfield Studio' })
    // A week on, in the studio's zone: 08:15 UTC is 09:15 in Lisbon in May.
    expect(letter?.text).toContain('Tue 26 May, 09:15')
    expect(letter?.text).toContain(`https://lessons.northfield.test/invite?token=${letter?.token}`)
    expect(await readInvite(await house.ctx(), { token: letter?.token ?? '', address: ADDRESS }))
      .toEqual({ email, role: 'coach', inviterName: 'Ines Carvalho', studioName: 'Northfield Studio', expiresAtMs: NOW_MS + 7 * DAY_MS })
  })

  it('makes a coach who is signed in, confirmed, and has an address of their own', async () => {
    await invite(owner, { email, role: 'coach' })
    const { viewer } = await acceptInvite(await house.ctx(), { ...mara, token: await linkTo(email) })
    expect(viewer).toMatchObject({ name: 'Mara Lindqvist', email, role: 'coach', isCoach: true, timeZone: 'Europe/Stockholm' })
    expect(await listStudioCoaches(await house.ctx()))
      .toEqual({ items: [{ id: viewer.id, name: 'Mara Lindqvist', hasPicture: false, slug: 'mara-lindqvist', isOpen: true, about: '' }] })
    expect((await listAllInvites(owner, { limit: 25 })).items).toMatchObject([{ state: 'accepted' }])
    expect(await house.letters()).toEqual([])
  })

  it('makes an owner who does not coach', async () => {
    await invite(owner, { email, role: 'owner' })
    const { viewer } = await acceptInvite(await house.ctx(), { ...mara, token: await linkTo(email) })
    expect(viewer).toMatchObject({ role: 'owner', isCoach: false })
  })

  it('gives two coaches of one name two addresses', async () => {
    await invite(owner, { email, role: 'coach' })
    await invite(owner, { email: 'other@northfield.test', role: 'coach' })
    await acceptInvite(await house.ctx(), { ...mara, token: await linkTo(email) })
    await acceptInvite(await house.ctx(), { ...mara, token: await linkTo('other@northfield.test') })
    expect((await listStudioCoaches(await house.ctx())).items.map(({ slug }) => slug).sort()).toEqual(['mara-lindqvist', 'mara-lindqvist-2'])
  })

  it('can be taken once, and by the very same request again', async () => {
    await invite(owner, { email, role: 'coach' })
    const token = await linkTo(email)
    const first = await acceptInvite(await house.ctx(), { ...mara, token })
    await expect(acceptInvite(await house.ctx(), { ...mara, token })).rejects.toMatchObject(gone)
    await expect(readInvite(await house.ctx(), { token, address: ADDRESS })).rejects.toMatchObject(gone)
    expect((await acceptInvite(await house.ctx(), { ...mara, token, isRepeated: true })).viewer).toEqual(first.viewer)
  })

  it('makes one account when it is taken twice at once', async () => {
    await invite(owner, { email, role: 'coach' })
    const token = await linkTo(email)
    const [one, other] = [await house.ctx(), await house.ctx()]
    const results = await Promise.allSettled([acceptInvite(one, { ...mara, token }), acceptInvite(other, { ...mara, token })])
    expect(results.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected'])
    expect(results.find(({ status }) => status === 'rejected')).toMatchObject({ reason: gone })
  })

  it('holds for seven days', async () => {
    await invite(owner, { email, role: 'coach' })
    const token = await linkTo(email)
    const late = { atMs: NOW_MS + 7 * DAY_MS }
    await expect(readInvite(await house.ctx(late), { token, address: ADDRESS })).rejects.toMatchObject(gone)
    await expect(acceptInvite(await house.ctx(late), { ...mara, token })).rejects.toMatchObject(gone)
    expect((await listAllInvites(await house.ctx(late), { limit: 25 })).items).toMatchObject([{ state: 'expired' }])
    expect(await readInvite(await house.ctx({ atMs: NOW_MS + 7 * DAY_MS - 1 }), { token, address: ADDRESS })).toMatchObject({ email })
  })

  it('replaces an open one to the same address, whose letter is not sent any more', async () => {
    await invite(owner, { email, role: 'coach' })
    const former = await linkTo(email)
    await invite(owner, { email: 'MARA@northfield.test', role: 'owner' })
    await expect(readInvite(await house.ctx(), { token: former, address: ADDRESS })).rejects.toMatchObject(gone)
    expect(await house.letters()).toMatchObject([{ to: 'MARA@northfield.test' }])
    expect((await listAllInvites(owner, { limit: 25 })).items).toMatchObject([{ role: 'owner', state: 'open' }])
  })

  it('cannot go to somebody with an account, nor be taken once there is one', async () => {
    await expect(invite(owner, { email: 'INES@northfield.test', role: 'coach' })).rejects.toMatchObject({ kind: 'wrong-moment', code: 'already-has-account' })
    await invite(owner, { email, role: 'coach' })
    await house.addPerson({ email })
    await expect(acceptInvite(await house.ctx(), { ...mara, token: await linkTo(email) })).rejects.toMatchObject({ code: 'already-has-account' })
  })

  it('is not kept away by a sign-up that nobody confirmed', async () => {
    const stranger = await house.addPerson({ email, isUnconfirmed: true })
    await invite(owner, { email, role: 'coach' })
    const { viewer } = await acceptInvite(await house.ctx(), { ...mara, token: await linkTo(email) })
    expect(viewer.id).not.toBe(stranger)
    expect(viewer.role).toBe('coach')
  })
})

describe('lists', () => {
  it('go through everybody once, newest first, a page at a time', async () => {
    const ids = [ownerId]
    for (let number = 0; number < 7; number++) {
      // Two of each moment, so that a page ends between people of one moment.
      ids.push(await house.addPerson({ email: `student${number}@northfield.test`, createdAtMs: NOW_MS - Math.floor(number / 2) }))
    }
    const seen: string[] = []
    const moments: number[] = []
    let cursor: string | undefined
    do {
      const page = await listPeople(owner, { cursor, limit: 3 })
      expect(page.items.length).toBeLessThanOrEqual(3)
      seen.push(...page.items.map(({ id }) => id))
      moments.push(...page.items.map(({ createdAtMs }) => createdAtMs))
      cursor = page.nextCursor ?? undefined
    } while (cursor !== undefined)
    expect([...seen].sort()).toEqual([...ids].sort())
    expect(moments).toEqual([...moments].sort((a, b) => b - a))
  })

  it('say who is suspended, and nothing that only the person knows', async () => {
    const id = await house.addPerson({ email, role: 'coach', name: 'Mara Lindqvist' })
    await house.db.updateTable('users').set({ suspended_at_ms: NOW_MS }).where('id', '=', id).execute()
    const row = (await listPeople(owner, { limit: 100 })).items.find(person => person.id === id)
    expect(row).toEqual({ id, name: 'Mara Lindqvist', email, role: 'coach', hasPicture: false, isSuspended: true, createdAtMs: NOW_MS - DAY_MS })
    expect(await listStudioCoaches(owner)).toEqual({ items: [] })
  })

  it.each(['users', 'invites'] as const)('find rows of %s by index, however many there are', async (table) => {
    const query = house.db.selectFrom(table).selectAll()
      .where(({ eb, refTuple, tuple }) => eb(refTuple('created_at_ms', 'id'), '<', tuple(NOW_MS, 'id')))
      .orderBy('created_at_ms', 'desc').orderBy('id', 'desc').limit(26)
    const { sql, parameters } = query.compile()
    const plan = await house.db.executeQuery<{ detail: string }>(CompiledQuery.raw(`explain query plan ${sql}`, [...parameters]))
    expect(plan.rows).toMatchObject([{ detail: expect.stringMatching(new RegExp(`^SEARCH ${table} USING INDEX ${table}_by_creation`)) }])
  })
})
