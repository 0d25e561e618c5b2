import { z } from 'zod'
import type { Outcome } from './outcome'
import { SKIPPED, withoutColours } from './outcome'

const errorSchema = z.object({ message: z.string().optional(), stack: z.string().optional() })

const specSchema = z.object({
  title: z.string(),
  file: z.string(),
  tests: z.array(z.object({
    status: z.enum(['expected', 'unexpected', 'flaky', 'skipped']),
    results: z.array(z.object({ errors: z.array(errorSchema) })),
  })),
})

const suiteSchema = z.object({
  title: z.string(),
  specs: z.array(specSchema).default([]),
  get suites() {
    return z.array(suiteSchema).default([])
  },
})

/** As much of Playwright's JSON report as counts. */
const reportSchema = z.object({
  suites: z.array(suiteSchema),
  errors: z.array(errorSchema),
})

/**
 * Reads Playwright's JSON report. Errors outside any test (a file that does not load, a failed set-up) are failures of their
 * own; a test that passed only when tried again failed.
 * @throws ZodError when it is no such report.
 */
export function readPlaywrightReport(json: unknown, testDir: string): Outcome[] {
  const report = reportSchema.parse(json)
  const tests = report.suites.flatMap(file => suiteOutcomes(file, [], testDir))
  const errors = report.errors.map((error): Outcome => ({
    title: 'outside any test', file: undefined, hasPassed: false, message: errorText(error),
  }))
  return [...tests, ...errors]
}

function suiteOutcomes(suite: z.output<typeof suiteSchema>, titles: string[], testDir: string): Outcome[] {
  const specs = suite.specs.flatMap(spec => spec.tests.map((test): Outcome => ({
    title: [...titles, spec.title].join(' › '),
    file: `${testDir}/${spec.file}`,
    hasPassed: test.status === 'expected',
    message: test.status === 'skipped' ? SKIPPED : test.results.flatMap(result => result.errors).map(errorText).join('\n\n'),
  })))
  // The outermost suite is the file, whose name stands in `file` already.
  return [...specs, ...suite.suites.flatMap(inner => suiteOutcomes(inner, [...titles, inner.title], testDir))]
}

function errorText(error: z.output<typeof errorSchema>): string {
  return withoutColours(error.stack ?? error.message ?? 'An error without words.')
}
