import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { AddressTaken, OwnerExists, makeFirstOwner } from '#server/features/people/first-owner.service'
import { resetPassword } from '#server/features/people/password.service'
import { signUp } from '#server/features/people/sign-up.service'
import type { House } from './open-house'
import { ADDRESS, DAY_MS, NOW_MS, PASSWORD, openHouse } from './open-house'

let house: House

beforeEach(async () => {
  house = await openHouse()
})
afterEach(() => house.close())

const input = {
  email: 'ines@northfield.test',
  name: 'Ines Carvalho',
  studio: { name: 'Elsewhere', timeZone: 'Europe/Madrid', currency: 'GBP' },
}

describe('the first owner', () => {
  it('chooses a password by the link, once, and gets no letter of a changed one', async () => {
    const { secret, expiresAtMs } = await makeFirstOwner(house.db, input, NOW_MS)
    expect(expiresAtMs).toBe(NOW_MS + DAY_MS)
    const { viewer } = await resetPassword(await house.ctx(), { token: secret, password: PASSWORD, address: ADDRESS })
    expect(viewer).toMatchObject({ email: input.email, name: input.name, role: 'owner', isCoach: false, timeZone: 'Europe/Lisbon' })
    await expect(resetPassword(await house.ctx(), { token: secret, password: PASSWORD, address: ADDRESS })).rejects.toMatchObject({ kind: 'gone' })
    expect(await house.letters()).toEqual([])
  })

  it('opens the studio when there is none, and leaves one that is there as it is', async () => {
    await makeFirstOwner(house.db, input, NOW_MS)
    const studio = () => house.db.selectFrom('studio').selectAll().executeTakeFirst()
    expect(await studio()).toMatchObject({ name: 'Northfield Studio', currency: 'EUR' })
    await house.db.deleteFrom('tokens').execute()
    await house.db.deleteFrom('users').execute()
    await house.db.deleteFrom('studio').execute()
    await makeFirstOwner(house.db, input, NOW_MS)
    expect(await studio()).toEqual({ id: 1, name: 'Elsewhere', time_zone: 'Europe/Madrid', currency: 'GBP', contact_email: input.email, adult_age: 18 })
  })

  it('is the first: refused when there is an owner, or the address is a student\'s', async () => {
    await makeFirstOwner(house.db, input, NOW_MS)
    await expect(makeFirstOwner(house.db, { ...input, email: 'other@northfield.test' }, NOW_MS)).rejects.toThrow(OwnerExists)
    await house.db.updateTable('users').set({ role: 'student' }).execute()
    await expect(makeFirstOwner(house.db, { ...input, email: 'INES@northfield.test' }, NOW_MS)).rejects.toThrow(AddressTaken)
  })

  it('cannot be displaced by signing up with the same address before the link is opened', async () => {
    const { secret } = await makeFirstOwner(house.db, input, NOW_MS)
    await signUp(await house.ctx(), {
      name: 'A stranger', email: input.email, password: 'the password of a stranger', birthDate: '1990-01-01', handedness: 'right',
      timeZone: 'UTC', address: ADDRESS,
    })
    expect((await resetPassword(await house.ctx(), { token: secret, password: PASSWORD, address: ADDRESS })).viewer.role).toBe('owner')
  })
})

describe('before the studio is set up', () => {
  it('nobody can sign up, and is told so', async () => {
    await house.db.deleteFrom('studio').execute()
    await expect(signUp(await house.ctx(), {
      name: 'Joel', email: 'joel@northfield.test', password: PASSWORD, birthDate: '1990-01-01', handedness: 'right', timeZone: 'UTC', address: ADDRESS,
    })).rejects.toMatchObject({ kind: 'unavailable', code: 'not-set-up' })
  })
})
