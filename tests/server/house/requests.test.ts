import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { z } from 'zod'
import { DEMO_PASSWORD } from '#fakes/demo/people'
import { signatureHeader } from '#fakes/payments/signature'
import { arrange } from '#tests/support/arrange'
import { call } from '#tests/support/call'
import type { World } from '#tests/support/world'
import { startWorld } from '#tests/support/world'
import type { Fixtures, Who } from './matrix'
import { MATRIX, makeFixtures } from './matrix'

const errorAnswer = z.strictObject({
  statusCode: z.number(),
  statusMessage: z.string(),
  data: z.strictObject({
    code: z.string().regex(/^[a-z0-9]+(-[a-z0-9]+)*$/),
    message: z.string().min(1),
    fields: z.record(z.string(), z.string()).optional(),
    requestId: z.uuid(),
  }),
})

let world: World
let fixtures: Fixtures

beforeAll(async () => {
  world = await startWorld({ index: 3 })
  fixtures = await makeFixtures(world)
})

afterAll(() => world.close())

/** Somebody for whom the handler comes as far as reading the body. */
function someoneAllowed(row: typeof MATRIX[number]): Exclude<Who, 'nobody' | 'otherGuardian' | 'suspended'> | undefined {
  const candidates = ['student', 'coach', 'owner', 'guardian'] as const
  return candidates.find(who => ![401, 403].includes(row.expect[who] ?? row.expect.others))
}

/** Forms with files have tests of their own, and the provider's event is judged by its signature alone. */
const NO_JSON = new Set(['/api/account/picture', '/api/reviews/:id/photos', '/webhooks/stripe'])
const WITH_BODY = MATRIX.filter(row => ['POST', 'PUT', 'PATCH'].includes(row.method) && !NO_JSON.has(row.route))

describe('[house.3] malformed input', () => {
  for (const [index, row] of WITH_BODY.entries()) {
    const as = someoneAllowed(row)
    it(`[house.3] ${row.method} ${row.route} (${index + 1}) answers 400 to what is not JSON and 422 to what does not fit`, async () => {
      const path = row.path(fixtures)
      const broken = await call(world, row.method, path, { as, rawBody: '{"half":' })
      expect([broken.status, errorAnswer.parse(broken.body).data.code]).toEqual([400, 'not-json'])
      const form = await call(world, row.method, path, { as, rawBody: 'a=b', headers: { 'content-type': 'application/x-www-form-urlencoded' } })
      expect([form.status, errorAnswer.parse(form.body).data.code]).toEqual([400, 'not-json'])
      for (const wrong of [[], 'text', 7, null]) {
        const answer = await call(world, row.method, path, { as, body: wrong })
        expect([JSON.stringify(wrong), answer.status]).toEqual([JSON.stringify(wrong), 422])
        expect(errorAnswer.parse(answer.body).data.fields).toBeDefined()
      }
    })
  }

  it('[house.3] names each field that does not fit', async () => {
    const answer = await call(world, 'POST', '/api/accounts', { body: { name: '', email: 'nowhere', password: 'short', birthDate: '1st May', handedness: 'both', timeZone: 'Golf/Green' } })
    expect(answer.status).toBe(422)
    expect(Object.keys(errorAnswer.parse(answer.body).data.fields ?? {}).sort()).toEqual(['birthDate', 'email', 'handedness', 'name', 'password', 'timeZone'])
  })

  it('[house.3] answers 404 to ids that cannot be and to ids that are not there', async () => {
    for (const id of ['1', '..%2f..%2fetc', '00000000-0000-7000-8000-000000000000', '%00', 'x'.repeat(500)]) {
      for (const path of [`/api/reviews/${id}`, `/api/clips/${id}/film`, `/api/people/${id}/picture`]) {
        const answer = await call(world, 'GET', path, { as: 'student' })
        expect([path, answer.status]).toEqual([path, 404])
        errorAnswer.parse(answer.body)
      }
    }
  })

  it('[house.3] refuses cursors of its own making and bodies over the limit', async () => {
    expect((await call(world, 'GET', '/api/reviews?cursor=abc', { as: 'student' })).status).toBe(422)
    expect((await call(world, 'GET', '/api/reviews?limit=1000', { as: 'student' })).status).toBe(422)
    expect((await call(world, 'POST', '/api/reviews', { as: 'student', rawBody: `"${'x'.repeat(300_000)}"` })).status).toBe(413)
    expect((await call(world, 'POST', '/api/reviews', { as: 'student', body: {}, key: 'short' })).status).toBe(400)
  })

  it('[house.3] pages lists without losing or repeating a row', async () => {
    for (let index = 0; index < 7; index += 1) await call(world, 'POST', '/api/reviews', { as: 'student2', body: { title: `Row ${index}` } })
    const page = z.object({ items: z.array(z.object({ id: z.string() })), nextCursor: z.string().nullable() })
    const ids: string[] = []
    let cursor: string | null = ''
    while (cursor !== null) {
      const answer = page.parse((await call(world, 'GET', `/api/reviews?limit=3${cursor && `&cursor=${cursor}`}`, { as: 'student2' })).body)
      ids.push(...answer.items.map(item => item.id))
      cursor = answer.nextCursor
    }
    const all = page.parse((await call(world, 'GET', '/api/reviews?limit=100', { as: 'student2' })).body)
    expect(ids).toEqual(all.items.map(item => item.id))
    expect(new Set(ids).size).toBe(ids.length)
  })
})

describe('[house.5] errors have one shape', () => {
  const clients: [string, Record<string, string>][] = [
    ['a card provider', { 'user-agent': 'Provider/1.0 (+webhooks)', 'accept': '*/*; q=0.5, application/json', 'content-type': 'application/json; charset=utf-8' }],
    ['a browser', { 'accept': 'text/html,application/xhtml+xml,application/xml;q=0.9,*/*;q=0.8', 'user-agent': 'Mozilla/5.0', 'sec-fetch-mode': 'navigate', 'sec-fetch-dest': 'document' }],
  ]
  for (const [name, headers] of clients) {
    it(`[house.5] for ${name}`, async () => {
      for (const [method, path] of [['GET', '/api/nothing'], ['GET', '/api/account'], ['POST', '/webhooks/stripe'], ['POST', '/webhooks/other'], ['GET', '/api/reviews/1']] as const) {
        const answer = await call(world, method, path, { rawBody: method === 'POST' ? '{}' : undefined, headers })
        expect([path, answer.headers.get('content-type')?.split(';')[0]]).toEqual([path, 'application/json'])
        expect(errorAnswer.parse(answer.body).statusCode).toBe(answer.status)
        expect(answer.status).toBeGreaterThanOrEqual(400)
        expect(answer.status).toBeLessThan(500)
      }
    })
  }

  it('[house.5] and pages have pages', async () => {
    const answer = await call(world, 'GET', '/no-such-page', { headers: { accept: 'text/html' } })
    expect(answer.status).toBe(404)
    expect(answer.headers.get('content-type')).toMatch(/^text\/html/)
  })
})

describe('what guards every request', () => {
  it('refuses writes that another site starts', async () => {
    for (const headers of [{ 'sec-fetch-site': 'cross-site' }, { 'sec-fetch-site': 'same-site' }, { 'sec-fetch-site': 'none' }]) {
      const answer = await call(world, 'POST', '/api/reviews', { as: 'student', body: {}, headers })
      expect([headers['sec-fetch-site'], answer.status, errorAnswer.parse(answer.body).data.code]).toEqual([headers['sec-fetch-site'], 403, 'other-site'])
    }
    const old = await fetch(`${world.url}/api/reviews`, { method: 'POST', headers: { 'origin': 'https://evil.example', 'cookie': world.cookie('student'), 'content-type': 'application/json' }, body: '{}' })
    expect(old.status).toBe(403)
    const unmarked = await fetch(`${world.url}/api/reviews`, { method: 'POST', headers: { 'cookie': world.cookie('student'), 'content-type': 'application/json' }, body: '{}' })
    expect(unmarked.status).toBe(403)
    const own = await fetch(`${world.url}/api/reviews`, { method: 'POST', headers: { 'origin': world.url, 'cookie': world.cookie('student'), 'content-type': 'application/json' }, body: '{}' })
    expect(own.status).toBe(201)
  })

  it('gives visitors no cookie, and signed-in people one that scripts and other sites cannot use', async () => {
    expect((await call(world, 'GET', '/')).headers.getSetCookie()).toEqual([])
    expect((await call(world, 'GET', '/api/session')).headers.getSetCookie()).toEqual([])
    const signedIn = await call(world, 'POST', '/api/session', { body: { email: 'coach@demo.turfnote.test', password: DEMO_PASSWORD } })
    const [cookie = ''] = signedIn.headers.getSetCookie()
    expect(cookie).toMatch(/^__Host-/)
    for (const part of ['HttpOnly', 'Secure', 'SameSite=Lax', 'Path=/']) expect(cookie).toContain(part)
  })

  it('takes no session from a header and has closed the address of the cookie module', async () => {
    const sealed = world.cookie('student').split('=').slice(1).join('=')
    const byHeader = await call(world, 'GET', '/api/account', { headers: { 'x-__host-turfnote-test-session': sealed, 'x-nuxt-session-session': sealed } })
    expect(byHeader.status).toBe(401)
    expect((await call(world, 'DELETE', '/api/_auth/session', { as: 'student' })).status).toBe(404)
  })

  it('refuses a cookie that was changed by a character', async () => {
    const cookie = world.cookie('student')
    const changed = cookie.slice(0, -1) + (cookie.endsWith('a') ? 'b' : 'a')
    expect((await call(world, 'GET', '/api/account', { cookie: changed })).status).toBe(401)
    expect((await call(world, 'GET', '/api/account', { cookie })).status).toBe(200)
  })

  it('sends the security headers, with a nonce that is new each time', async () => {
    const pages = [await call(world, 'GET', '/'), await call(world, 'GET', '/')]
    const nonces = pages.map(page => /'nonce-([^']+)'/.exec(page.headers.get('content-security-policy') ?? '')?.[1])
    expect(nonces[0]).toBeDefined()
    expect(nonces[0]).not.toBe(nonces[1])
    const policy = pages[0]?.headers.get('content-security-policy') ?? ''
    expect(policy).toContain(world.standIns.storageUrl)
    expect(policy).not.toContain('unsafe-eval')
    expect(/script-src[^;]*unsafe-inline/.test(policy)).toBe(false)
    for (const [name, value] of [['x-content-type-options', 'nosniff'], ['x-frame-options', 'DENY'], ['cross-origin-opener-policy', 'same-origin']] as const) {
      expect(pages[0]?.headers.get(name)).toBe(value)
    }
    const scripts = pages[0]?.text.match(/<script(?![^>]*type="application\/json")[^>]*>/g) ?? []
    expect(scripts.length).toBeGreaterThan(0)
    expect(scripts.every(script => script.includes(`nonce="${nonces[0]}"`))).toBe(true)
  })

  it('writes a JSON line per request, with the id that the answer names and no secret', async () => {
    const answer = await call(world, 'GET', `/api/invites/${'S'.repeat(43)}`)
    const requestId = answer.headers.get('x-request-id') ?? ''
    await expect.poll(() => world.app.output()).toContain(requestId)
    const line = world.app.output().split('\n').find(text => text.includes(requestId)) ?? ''
    expect(JSON.parse(line)).toMatchObject({ requestId, method: 'GET', path: '/api/invites/:secret', status: 410 })
    expect(world.app.output()).not.toContain('S'.repeat(43))
    expect(world.app.output()).not.toContain(DEMO_PASSWORD)
  })

  it('keeps a signed event of the card provider once, and refuses 200 forged ones', async () => {
    const body = JSON.stringify({ id: 'evt_test_1', object: 'event', type: 'payment_intent.succeeded', created: 1_700_000_000, livemode: false, data: { object: { id: 'pi_test_1', object: 'payment_intent', metadata: {} } } })
    const header = signatureHeader(body, world.environment.STRIPE_WEBHOOK_SECRET ?? '', Math.floor(Date.now() / 1000))
    for (let times = 0; times < 3; times += 1) {
      const answer = await call(world, 'POST', '/webhooks/stripe', { rawBody: body, headers: { 'stripe-signature': header, 'sec-fetch-site': 'cross-site' } })
      expect([answer.status, answer.body]).toEqual([200, { received: true }])
    }
    const forged = await Promise.all(Array.from({ length: 200 }, (_, index) => call(world, 'POST', '/webhooks/stripe', {
      rawBody: body.replace('evt_test_1', `evt_forged_${index}`), headers: { 'stripe-signature': header },
    })))
    expect(new Set(forged.map(answer => answer.status))).toEqual(new Set([400]))
    expect(arrange(world, database => database.prepare('select id, type, object_id from provider_events').all()))
      .toEqual([{ id: 'evt_test_1', type: 'payment_intent.succeeded', object_id: 'pi_test_1' }])
  })
})
