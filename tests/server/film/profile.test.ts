import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { arrange } from '#tests/support/arrange'
import { call } from '#tests/support/call'
import type { World } from '#tests/support/world'
import { startWorld } from '#tests/support/world'

let world: World

beforeAll(async () => {
  world = await startWorld({ index: 40 })
})

afterAll(() => world.close())

const INCH_M = 0.0254

const PROFILE = {
  handedness: 'left',
  handicap: '18.4, usually 92',
  limits: 'Left wrist.',
  goals: 'Break 90 by August.',
  practicePlaces: ['range_mat', 'net'],
  sessionsPerWeek: 3,
  minutesPerSession: 40,
  clubs: [
    { club: '7-iron', lengthM: 37 * INCH_M, lieDeg: 62.5, carryM: 135 },
    { club: 'driver', lengthM: null, lieDeg: null, carryM: null },
    { club: 'my uncle\'s chipper', lengthM: 35 * INCH_M, lieDeg: null, carryM: 20 },
  ],
}

function put(change: Record<string, unknown>, as: 'student' | 'student2' = 'student') {
  return call(world, 'PUT', '/api/profile', { as, body: { ...PROFILE, ...change } })
}

function withClub(change: Record<string, unknown>) {
  return { clubs: [{ club: '7-iron', lengthM: null, lieDeg: null, carryM: null, ...change }] }
}

describe('a student\'s profile', () => {
  it('begins with what signing up asked for', async () => {
    expect(await call(world, 'GET', '/api/profile', { as: 'student3' })).toMatchObject({
      status: 200,
      body: {
        birthDate: '1994-07-15', handedness: 'left', handicap: '', limits: 'Left wrist, healed last year.', goals: '', practicePlaces: [],
        sessionsPerWeek: null, minutesPerSession: null, clubs: [],
      },
    })
  })

  it('is kept whole, clubs in the order given, and is each student\'s own', async () => {
    const before = (await call(world, 'GET', '/api/profile', { as: 'student2' })).body
    expect(await put({})).toMatchObject({ status: 200, body: { ...PROFILE, birthDate: '1986-04-02' } })
    expect((await call(world, 'GET', '/api/profile', { as: 'student' })).body).toEqual({ ...PROFILE, birthDate: '1986-04-02' })
    expect((await call(world, 'GET', '/api/profile', { as: 'student2' })).body).toEqual(before)
    expect((await put({ clubs: [PROFILE.clubs[1]] })).body).toMatchObject({ clubs: [PROFILE.clubs[1]] })
  })

  it('does not change the date of birth, which decides who must consent', async () => {
    expect((await put({ birthDate: '2001-01-01' })).body).toMatchObject({ birthDate: '1986-04-02' })
  })

  it('what hurts reaches the coach with the review', async () => {
    await put({ limits: 'Right knee.' })
    const review = await call(world, 'POST', '/api/reviews', { as: 'student', body: {} })
    expect(review.body).toMatchObject({ limits: 'Right knee.', handedness: 'left' })
  })

  // Equipment Rules (R&A and USGA) 2.1c: at least 18 in; except putters at most 48 in.
  it.each([
    ['18 inches', '7-iron', 18, 200],
    ['48 inches', 'driver', 48, 200],
    ['17.9 inches', '7-iron', 17.9, 422],
    ['48.1 inches', 'driver', 48.1, 422],
    ['a putter of 52 inches', 'putter', 52, 200],
    ['a putter of 17 inches', 'putter', 17, 422],
    ['35 metres, typed as centimetres would be', '7-iron', 1400, 422],
  ])('a club of %s: %s of %d inches is answered with %d', async (_words, club, lengthIn, status) => {
    const answer = await put(withClub({ club, lengthM: lengthIn * INCH_M }))
    expect(answer.status).toBe(status)
    if (status === 422) expect(answer.body).toMatchObject({ data: { fields: { 'clubs.0.lengthM': expect.stringMatching(/at (least|most) \d\d inches/) } } })
  })

  it.each([
    [withClub({ lieDeg: 44 }), 'clubs.0.lieDeg'],
    [withClub({ lieDeg: 81 }), 'clubs.0.lieDeg'],
    [withClub({ carryM: -1 }), 'clubs.0.carryM'],
    [withClub({ carryM: 451 }), 'clubs.0.carryM'],
    [withClub({ club: '' }), 'clubs.0.club'],
    [withClub({ club: 'x'.repeat(41) }), 'clubs.0.club'],
    [withClub({ lengthM: '37 in' }), 'clubs.0.lengthM'],
    [{ clubs: [...withClub({}).clubs, ...withClub({ club: '7-IRON' }).clubs] }, 'clubs'],
    [{ clubs: Array.from({ length: 31 }, (_, index) => withClub({ club: `club ${index}` }).clubs[0]) }, 'clubs'],
    [{ handedness: 'both' }, 'handedness'],
    [{ practicePlaces: ['garden'] }, 'practicePlaces.0'],
    [{ practicePlaces: ['net', 'net'] }, 'practicePlaces'],
    [{ sessionsPerWeek: 2.5 }, 'sessionsPerWeek'],
    [{ sessionsPerWeek: 22 }, 'sessionsPerWeek'],
    [{ minutesPerSession: 0 }, 'minutesPerSession'],
    [{ goals: 'g'.repeat(501) }, 'goals'],
    [{ handicap: undefined }, 'handicap'],
  ])('what does not fit is refused by name and nothing is changed (%#)', async (change, field) => {
    await put({})
    const answer = await put({ goals: 'Something else.', ...change })
    expect(answer).toMatchObject({ status: 422, body: { data: { code: 'invalid-fields', fields: { [field]: expect.any(String) } } } })
    expect((await call(world, 'GET', '/api/profile', { as: 'student' })).body).toMatchObject(PROFILE)
  })
})

describe('a coach\'s page', () => {
  it('is found by the name in its address, by anybody', async () => {
    expect(await call(world, 'GET', '/api/coaches/mara-lindqvist')).toMatchObject({
      status: 200, body: { name: 'Mara Lindqvist', slug: 'mara-lindqvist', isOpen: true, hasPicture: false, about: expect.stringContaining('Irons') },
    })
  })

  it('still stands while they take no reviews, and is gone while they are suspended', async () => {
    arrange(world, database => database.prepare('update coaches set is_open = 0 where slug = \'tomas-abara\'').run())
    expect(await call(world, 'GET', '/api/coaches/tomas-abara')).toMatchObject({ status: 200, body: { isOpen: false } })
    arrange(world, database => database.prepare('update users set suspended_at_ms = 1 where name = \'Tomas Abara\'').run())
    expect((await call(world, 'GET', '/api/coaches/tomas-abara')).status).toBe(404)
  })

  it.each(['nobody-of-that-name', 'MARA', 'mara%20lindqvist', 'x'.repeat(81)])('%s leads nowhere', async (slug) => {
    expect(await call(world, 'GET', `/api/coaches/${slug}`)).toMatchObject({ status: 404, body: { data: { code: 'not-found' } } })
  })
})
