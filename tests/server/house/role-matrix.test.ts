import { readFileSync } from 'node:fs'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { z } from 'zod'
import { DEMO_ACCOUNTS, DEMO_PASSWORD } from '#fakes/demo/people'
import { arrange, copyAccount, giveCredits } from '#tests/support/arrange'
import { call } from '#tests/support/call'
import type { World } from '#tests/support/world'
import { startWorld } from '#tests/support/world'
import type { Fixtures, Row, Who } from './matrix'
import { MATRIX, WHO, makeFixtures } from './matrix'

const NUXTS_OWN = new Set(['/__nuxt_error', '/__nuxt_island/**'])

let world: World
let fixtures: Fixtures
const cookies = new Map<Who, string>()

beforeAll(async () => {
  world = await startWorld({ index: 1 })
  for (const { email } of DEMO_ACCOUNTS) giveCredits(world, email, 20)
  fixtures = await makeFixtures(world)
  copyAccount(world, { from: 'guardian@demo.turfnote.test', email: 'other-guardian@demo.turfnote.test', name: 'Other Guardian' })
  copyAccount(world, { from: 'student3@demo.turfnote.test', email: 'suspended@demo.turfnote.test', name: 'Suspended' })
  cookies.set('otherGuardian', await signIn('other-guardian@demo.turfnote.test'))
  cookies.set('suspended', await signIn('suspended@demo.turfnote.test'))
  arrange(world, database => database.prepare('update users set suspended_at_ms = 1 where email = ?').run('suspended@demo.turfnote.test'))
})

afterAll(() => world.close())

async function signIn(email: string): Promise<string> {
  const answer = await call(world, 'POST', '/api/session', { body: { email, password: DEMO_PASSWORD } })
  expect(answer.status).toBe(200)
  return answer.headers.getSetCookie().map(cookie => cookie.split(';')[0]).join('; ')
}

function cookieOf(who: Who): string | undefined {
  if (who === 'nobody') return undefined
  if (who === 'otherGuardian' || who === 'suspended') return cookies.get(who)
  return cookies.get(who) ?? world.cookie(who)
}

async function askAs(row: Row, who: Who) {
  const expected = row.expect[who] ?? row.expect.others
  const isAllowed = expected < 300
  const fresh = isAllowed && row.fresh ? await row.fresh(fixtures, who) : { path: row.path(fixtures), body: row.body }
  const answer = await call(world, row.method, fresh.path, { cookie: cookieOf(who), body: fresh.body ?? row.body })
  return { expected, answer }
}

describe('[house.3] role matrix', () => {
  it('[house.3] has a row for every route of the build', () => {
    const routes = z.array(z.object({ method: z.string(), route: z.string() }))
      .parse(JSON.parse(readFileSync('.output/server/routes.json', 'utf8')))
      .filter(({ route }) => !NUXTS_OWN.has(route))
      .map(({ method, route }) => `${method} ${route}`)
    const rows = new Set(MATRIX.map(row => `${row.method} ${row.route}`))
    expect(routes.filter(route => !rows.has(route))).toEqual([])
    expect([...rows].filter(row => !routes.includes(row))).toEqual([])
  })

  for (const [index, row] of MATRIX.entries()) {
    it(`[house.3] ${row.method} ${row.route} (row ${index + 1}) answers each role as it should`, async () => {
      const statuses: Record<string, number> = {}
      const expected: Record<string, number> = {}
      for (const who of WHO) {
        const cell = await askAs(row, who)
        statuses[who] = cell.answer.status
        expected[who] = cell.expected
      }
      expect(statuses).toEqual(expected)
    })
  }
})
