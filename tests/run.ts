import { endAllCommands } from './runner/command'
import type { Options } from './runner/options'
import { BadOptions, readOptions } from './runner/options'
import type { StageName, StageResult } from './runner/outcome'
import { notRun, runStage } from './runner/stages'
import { countOutcomes, exitCode, lastLine, stageFailures, stageLine } from './runner/summary'
import { hasTag, reportTag, TAGS } from './runner/tags'

/** Two at a time only where each uses one core: the tests have two workers of their own. */
const ORDER: readonly (readonly StageName[])[] = [['lint', 'types'], ['unit'], ['components'], ['build'], ['server'], ['browser']]

/** `npm test`: every stage runs, whatever the ones before it did, so that one run shows the whole picture. */
async function main(): Promise<void> {
  const options = readOptions(process.argv.slice(2))
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) {
    process.once(signal, () => {
      endAllCommands()
      process.exit(130)
    })
  }
  const results = await runAll(options)
  const outcomes = [...results.flatMap(result => result.outcomes), ...tagFailures(options, results)]
  const counts = countOutcomes(outcomes)
  console.log(lastLine(counts))
  process.exitCode = exitCode(counts)
}

async function runAll({ tag, stages }: Options): Promise<StageResult[]> {
  const results: StageResult[] = []
  for (const group of ORDER) {
    await Promise.all(group.filter(name => stages.includes(name)).map(async (name) => {
      const result = needsBuild(name) && hasBuildFailed(results)
        ? notRun(name, 'Not run: the build failed.')
        : await runStage(name, tag)
      results.push(result)
      console.log(stageLine(result))
      const failures = stageFailures(result)
      if (failures !== '') console.log(failures)
    }))
  }
  return results
}

function needsBuild(name: StageName): boolean {
  return name === 'server' || name === 'browser'
}

function hasBuildFailed(results: readonly StageResult[]): boolean {
  return results.some(result => result.name === 'build' && result.outcomes.some(outcome => !outcome.hasPassed))
}

function tagFailures({ tag }: Options, results: readonly StageResult[]) {
  if (tag === undefined) return []
  const tagged = results.flatMap(result => result.outcomes).filter(outcome => hasTag(outcome, tag))
  const { lines, missing } = reportTag(tag, TAGS[tag] ?? [], tagged)
  console.log(['', ...lines, ...missing.map(outcome => `  ✗ ${outcome.message}`), ''].join('\n'))
  return missing
}

main().catch((error: unknown) => {
  console.error(error instanceof BadOptions ? error.message : error)
  console.log('0 passed, 1 failed')
  process.exitCode = 1
})
