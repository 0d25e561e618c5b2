import { parseArgs } from 'node:util'
import { z } from 'zod'
import { emailSchema, requiredText, timeZoneSchema } from '#shared/schemas/common'
import { createClock } from '#server/adapters/clock'
import { openDatabase } from '#server/database/client'
import { migrate } from '#server/database/migrate'
import { AddressTaken, OwnerExists, makeFirstOwner } from '#server/features/people/first-owner.service'
import { BadSettings, readSettings } from '#server/settings'

const USAGE = `Makes the first owner of a studio and prints the link by which they choose a password.

  npm run first-owner -- --email <address> --name <name>
    --studio <name>      what the studio is called (Golf studio)
    --zone <zone>        the studio's time zone, such as Europe/Lisbon (this machine's)
    --currency <code>    the currency of its prices, such as EUR (EUR)

Settings come from the environment, as for the server. The last three count only while the studio is not set up.`

const flagsSchema = z.object({
  email: emailSchema,
  name: requiredText(80),
  studio: requiredText(80),
  zone: timeZoneSchema,
  currency: z.string().trim().toUpperCase().regex(/^[A-Z]{3}$/, 'Three letters, such as EUR.'),
})

/** A flag is missing or cannot be right. */
class BadFlags extends Error {
  override name = 'BadFlags'
}

function readFlags(args: string[]): z.output<typeof flagsSchema> {
  const { values } = parseArgs({
    args,
    options: {
      email: { type: 'string', default: '' },
      name: { type: 'string', default: '' },
      studio: { type: 'string', default: 'Golf studio' },
      zone: { type: 'string', default: new Intl.DateTimeFormat().resolvedOptions().timeZone },
      currency: { type: 'string', default: 'EUR' },
    },
  })
  const parsed = flagsSchema.safeParse(values)
  if (parsed.success) return parsed.data
  throw new BadFlags(parsed.error.issues.map(issue => `--${issue.path.map(String).join('.')}: ${issue.message}`).join('\n'))
}

async function run(): Promise<void> {
  const flags = readFlags(process.argv.slice(2))
  const settings = readSettings(process.env, process.argv[1] ?? '.')
  const { db, close } = openDatabase(settings.databasePath)
  try {
    await migrate(db)
    const { secret, expiresAtMs } = await makeFirstOwner(db, {
      email: flags.email,
      name: flags.name,
      studio: { name: flags.studio, timeZone: flags.zone, currency: flags.currency },
    }, createClock(settings.clockOffsetFile).nowMs())
    console.log(`${flags.name} owns the studio now. Open this link to choose a password; it works once, until ${new Date(expiresAtMs).toISOString()}:\n`)
    console.log(`${settings.appUrl}/reset?token=${secret}`)
  }
  finally {
    await close()
  }
}

function isExpected(error: unknown): error is Error {
  const isUsage = error instanceof TypeError && 'code' in error && String(error.code).startsWith('ERR_PARSE_ARGS')
  return isUsage || [BadFlags, BadSettings, OwnerExists, AddressTaken].some(kind => error instanceof kind)
}

run().catch((error: unknown) => {
  if (!isExpected(error)) throw error
  console.error(error instanceof BadSettings || error instanceof OwnerExists || error instanceof AddressTaken ? error.message : `${error.message}\n\n${USAGE}`)
  process.exitCode = 1
})
