import { relative } from 'node:path'
import { z } from 'zod'
import type { Outcome } from './outcome'
import { SKIPPED, withoutColours } from './outcome'

/** As much of vitest's JSON report as counts. */
const reportSchema = z.object({
  testResults: z.array(z.object({
    name: z.string(),
    status: z.enum(['passed', 'failed']),
    message: z.string(),
    assertionResults: z.array(z.object({
      ancestorTitles: z.array(z.string()),
      title: z.string(),
      status: z.string(),
      failureMessages: z.array(z.string()).nullish(),
    })),
  })),
})

/**
 * Reads vitest's JSON report. A file that could not be loaded, or whose set-up failed, is one failure of its own: its
 * tests are missing from the report or stand there as skipped.
 * @throws ZodError when it is no such report.
 */
export function readVitestReport(json: unknown, root: string): Outcome[] {
  return reportSchema.parse(json).testResults.flatMap((result) => {
    const file = relative(root, result.name)
    const outcomes = result.assertionResults.map((test): Outcome => ({
      title: [...test.ancestorTitles, test.title].filter(title => title !== '').join(' › '),
      file,
      hasPassed: test.status === 'passed',
      message: messageOf(test.status, test.failureMessages ?? []),
    }))
    const isFileAtFault = result.status === 'failed' && !result.assertionResults.some(test => test.status === 'failed')
    return isFileAtFault
      ? [...outcomes, { title: file, file, hasPassed: false, message: withoutColours(result.message) || 'The file failed without a message.' }]
      : outcomes
  })
}

function messageOf(status: string, failures: string[]): string {
  if (status === 'passed') return ''
  if (status === 'failed') return withoutColours(failures.join('\n\n'))
  return SKIPPED
}
