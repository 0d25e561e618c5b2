import { describe, expect, it } from 'vitest'
import { addressesFrom } from '#fakes/demo/addresses'
import { appEnvironment } from '#fakes/demo/environment'
import { BadSettings, readSettings } from '#server/settings'

const WHOLE = appEnvironment(addressesFrom(3000, 3101), 'data')

function problemsOf(environment: Record<string, string | undefined>): string[] {
  try {
    readSettings(environment, 'server/index.mjs')
    return []
  }
  catch (error) {
    return error instanceof BadSettings ? error.problems : [String(error)]
  }
}

describe('settings', () => {
  it('takes a whole environment and listens on 127.0.0.1 unless told otherwise', () => {
    const { HOST: _host, ...withoutHost } = WHOLE
    const settings = readSettings(withoutHost, '/srv/server/index.mjs')
    expect(settings.host).toBe('127.0.0.1')
    expect(settings.filmReaderPath).toBe('/srv/server/workers/film-reader.mjs')
    expect(settings.ffmpegPath).toBeUndefined()
    expect(settings.limitsDatabasePath).not.toBe(settings.databasePath)
  })

  it('names every missing one at once', () => {
    const problems = problemsOf({})
    for (const name of ['APP_URL', 'DATABASE_PATH', 'NUXT_SESSION_PASSWORD', 'STORAGE_ENDPOINT', 'STORAGE_REGION', 'STORAGE_BUCKET',
      'STORAGE_ACCESS_KEY', 'STORAGE_SECRET_KEY', 'STRIPE_SECRET_KEY', 'STRIPE_WEBHOOK_SECRET', 'SMTP_URL', 'MAIL_FROM']) {
      expect(problems).toContain(`${name}: missing`)
    }
  })

  it('takes an empty line of an environment file for a missing one', () => {
    expect(problemsOf({ ...WHOLE, SMTP_URL: '' })).toEqual(['SMTP_URL: missing'])
  })

  const malformed: [string, string][] = [
    ['APP_URL', 'not an address'],
    ['PORT', 'eighty'],
    ['NUXT_SESSION_PASSWORD', 'too short'],
    ['STRIPE_WEBHOOK_SECRET', 'secret'],
    ['SMTP_URL', 'http://mail.example.org'],
    ['MAIL_FROM', 'nobody'],
    ['TRUSTED_PROXY', 'perhaps'],
  ]
  for (const [name, value] of malformed) {
    it(`refuses ${name}=${value} by name and never prints its value`, () => {
      const problems = problemsOf({ ...WHOLE, [name]: value })
      expect(problems).toHaveLength(1)
      expect(problems[0]).toMatch(new RegExp(`^${name}: `))
    })
  }
})
