import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { DEMO_PASSWORD } from '#fakes/demo/people'
import { call } from '#tests/support/call'
import type { World } from '#tests/support/world'
import { startWorld } from '#tests/support/world'

let world: World

beforeAll(async () => {
  world = await startWorld({ index: 22, environment: { LIMITS_FACTOR: '1', TRUSTED_PROXY: 'true' } })
})
afterAll(() => world.close())

function signIn(email: string, password: string, from: string) {
  return call(world, 'POST', '/api/session', { body: { email, password }, headers: { 'x-forwarded-for': from } })
}

describe('limits over HTTP', () => {
  it('end guessing at one account from one network, say when to go on, and leave its owner the others', async () => {
    const email = 'student@demo.turfnote.test'
    const statuses: number[] = []
    for (let time = 0; time < 9; time++) statuses.push((await signIn(email, `guess ${time}`, `spoofed, 198.51.100.7`)).status)
    expect(statuses).toEqual([...Array.from({ length: 8 }, () => 401), 429])
    const refused = await signIn(email, DEMO_PASSWORD, '198.51.100.7')
    expect(refused.body).toMatchObject({ statusCode: 429, data: { code: 'too-many-tries' } })
    expect(Number(refused.headers.get('retry-after'))).toBeGreaterThan(0)
    // What a client writes before the proxy's own hop opens no new allowance.
    expect((await signIn(email, DEMO_PASSWORD, '203.0.113.1, 198.51.100.7')).status).toBe(429)
    expect((await signIn(email, DEMO_PASSWORD, '203.0.113.1')).status).toBe(200)
  })

  it('outlive a restart', async () => {
    await world.restart()
    expect((await signIn('student@demo.turfnote.test', DEMO_PASSWORD, '198.51.100.7')).status).toBe(429)
  })

  it('let five letters an hour go to one address, and answer the same whether it is known', async () => {
    const ask = async (email: string, from: string) => (await call(world, 'POST', '/api/password/forgot', { body: { email }, headers: { 'x-forwarded-for': from } })).status
    for (const email of ['student3@demo.turfnote.test', 'nobody@northfield.test']) {
      const statuses: number[] = []
      for (let time = 0; time < 6; time++) statuses.push(await ask(email, `192.0.2.${time}`))
      expect(statuses).toEqual([202, 202, 202, 202, 202, 429])
    }
  })
})
