import { existsSync, mkdirSync, readFileSync, rmSync } from 'node:fs'
import { performance } from 'node:perf_hooks'
import type { CommandResult } from './command'
import { runCommand } from './command'
import type { Outcome, StageName, StageResult } from './outcome'
import { readPlaywrightReport } from './playwright-report'
import { hasTag } from './tags'
import { readVitestReport } from './vitest-report'

const MINUTE_MS = 60_000
export const REPORT_DIR = '.test'
export const BROWSER_TESTS = 'tests/browser'

type Command = readonly [program: string, ...commandArguments: string[]]

interface Stage {
  commands: readonly Command[]
  limitMs: number
  /** Absent for a stage that counts as one. */
  readReport?: (json: unknown) => Outcome[]
}

function stageOf(name: StageName, tag: string | undefined): Stage {
  switch (name) {
    case 'lint': return { commands: [['eslint', '.', '--max-warnings', '0']], limitMs: 6 * MINUTE_MS }
    // In this order: `nuxt typecheck` writes into .nuxt, from where the linter reads its settings when it starts beside it.
    case 'types': return { commands: [['tsc', '-p', 'tsconfig.tools.json', '--noEmit'], ['nuxt', 'typecheck']], limitMs: 6 * MINUTE_MS }
    case 'build': return { commands: [['jiti', 'tests/runner/build.ts']], limitMs: 6 * MINUTE_MS }
    case 'browser': return {
      commands: [['playwright', 'test', ...tag ? ['--pass-with-no-tests', '--grep', tagPattern(tag)] : []]],
      limitMs: 10 * MINUTE_MS,
      readReport: json => readPlaywrightReport(json, BROWSER_TESTS),
    }
    default: return {
      commands: [[
        'vitest', 'run', '--project', name, '--maxWorkers=2', '--reporter=default', '--reporter=json', `--outputFile.json=${reportPath(name)}`,
        ...tag ? ['--testNamePattern', tagPattern(tag)] : [],
      ]],
      limitMs: 10 * MINUTE_MS,
      readReport: json => readVitestReport(json, process.cwd()),
    }
  }
}

/** Runs a stage to its end, whatever that is. With `tag`, only tests that carry it run and count. */
export async function runStage(name: StageName, tag: string | undefined): Promise<StageResult> {
  const stage = stageOf(name, tag)
  mkdirSync(REPORT_DIR, { recursive: true })
  rmSync(reportPath(name), { force: true })
  const startedAt = performance.now()
  const results: CommandResult[] = []
  for (const [program, ...commandArguments] of stage.commands) {
    results.push(await runCommand(`node_modules/.bin/${program}`, commandArguments, { limitMs: stage.limitMs }))
  }
  const seconds = (performance.now() - startedAt) / 1000
  const outcomes = stage.readReport ? testOutcomes(name, stage.readReport, results, tag) : [wholeStage(name, results)]
  return { name, seconds, outcomes, output: results.map(result => result.output).join('') }
}

/** The result of a stage that could not be tried. */
export function notRun(name: StageName, reason: string): StageResult {
  return { name, seconds: 0, outcomes: [{ title: name, file: undefined, hasPassed: false, message: reason }], output: '' }
}

function wholeStage(name: StageName, results: readonly CommandResult[]): Outcome {
  const problem = results.map(problemOf).find(text => text !== '') ?? ''
  return { title: name, file: undefined, hasPassed: problem === '', message: problem }
}

function testOutcomes(
  name: StageName, readReport: (json: unknown) => Outcome[], results: readonly CommandResult[], tag: string | undefined,
): Outcome[] {
  const all = readOutcomes(name, readReport)
  const counted = tag === undefined ? all : all.filter(outcome => hasTag(outcome, tag) || outcome.file === outcome.title)
  const problem = wholeStage(name, results)
  // A tool that ends badly though every test passed (a fault outside any test, a report never written) must not pass.
  const isExplained = problem.hasPassed || counted.some(outcome => !outcome.hasPassed)
  return isExplained ? counted : [...counted, problem]
}

function readOutcomes(name: StageName, readReport: (json: unknown) => Outcome[]): Outcome[] {
  const path = reportPath(name)
  try {
    return existsSync(path) ? readReport(JSON.parse(readFileSync(path, 'utf8'))) : []
  }
  catch (error) {
    return [{ title: path, file: undefined, hasPassed: false, message: `Unreadable: ${error instanceof Error ? error.message : String(error)}` }]
  }
}

function problemOf({ code, hasTimedOut }: CommandResult): string {
  if (hasTimedOut) return 'It took too long and was ended.'
  if (code === 0) return ''
  return code === undefined ? 'A signal ended it.' : `It ended with code ${code}.`
}

function reportPath(name: StageName): string {
  return `${REPORT_DIR}/${name}.json`
}

function tagPattern(tag: string): string {
  return `\\[${tag}\\.`
}
