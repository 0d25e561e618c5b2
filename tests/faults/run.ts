import type { Fault } from './fault'
import { filmKills } from './film/kills'
import { kill } from './kill'

/** The long fault tests; their short forms run with `npm test`. */
const FAULTS: Record<string, Fault> = { kill, 'film-kills': filmKills }

/** `npm run test:faults [name]`: each fault, and its control that must fail. Ends with 1 when one did not hold or a control found nothing. */
async function main(name: string | undefined): Promise<void> {
  const chosen = Object.entries(FAULTS).filter(([known]) => name === undefined || known === name)
  if (chosen.length === 0) console.log(`Unknown: ${name}. There are:\n${Object.entries(FAULTS).map(([known, { about }]) => `  ${known.padEnd(8)} ${about}`).join('\n')}`)
  let passed = 0
  let failed = chosen.length === 0 ? 1 : 0
  for (const [known, fault] of chosen) {
    console.log(`${known}: ${fault.about}`)
    const found = await fault.control()
    console.log(found.length > 0 ? `  control: found what was broken on purpose (${found[0]})` : '  ✗ control: found nothing, so this test is blind')
    const problems = await fault.run(line => console.log(`  ${line}`))
    problems.forEach(problem => console.log(`  ✗ ${problem}`))
    if (found.length > 0 && problems.length === 0) passed += 1
    else failed += 1
  }
  console.log(`${passed} passed, ${failed} failed`)
  process.exitCode = failed > 0 ? 1 : 0
}

main(process.argv[2]).catch((error: unknown) => {
  console.error(error)
  // At once: whatever a failed test left open must not keep it waiting.
  process.exit(1)
})
