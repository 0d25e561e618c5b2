import type { Outcome, StageResult } from './outcome'

const OUTPUT_LINES = 200
const MESSAGE_LINES = 40

/** One line a stage. */
export function stageLine({ name, seconds, outcomes }: StageResult): string {
  const { passed, failed } = countOutcomes(outcomes)
  const counts = failed === 0 ? `${passed} passed` : `${passed} passed, ${failed} FAILED`
  return `${name.padEnd(12)}${seconds.toFixed(1).padStart(7)} s   ${counts}`
}

/** What of a stage has to be read in order to mend it; nothing when it passed. */
export function stageFailures({ outcomes, output }: StageResult): string {
  const failures = outcomes.filter(outcome => !outcome.hasPassed)
  if (failures.length === 0) return ''
  const details = detailsIn(output)
  const told = failures.map((failure) => {
    const message = details === '' ? firstLines(failure.message, MESSAGE_LINES) : firstLines(failure.message, 1)
    return `  ✗ ${failure.file ? `${failure.file}: ` : ''}${failure.title}\n${indent(message)}`
  })
  // Only a failure of the whole stage needs all that was printed: single tests speak for themselves.
  const isWhole = failures.some(failure => failure.file === undefined)
  const rest = isWhole ? lastLines(output) : firstLines(details, OUTPUT_LINES)
  return [...told, ...rest === '' ? [] : [indent(rest)]].join('\n')
}

/** Vitest's report as JSON leaves out what was expected and what came; what it prints for people holds it, from this heading on. */
function detailsIn(output: string): string {
  const start = output.search(/^⎯+ Failed (?:Tests|Suites) /m)
  return start === -1 ? '' : output.slice(start)
}

export function countOutcomes(outcomes: readonly Outcome[]): { passed: number, failed: number } {
  const passed = outcomes.filter(outcome => outcome.hasPassed).length
  return { passed, failed: outcomes.length - passed }
}

export function lastLine({ passed, failed }: { passed: number, failed: number }): string {
  return `${passed} passed, ${failed} failed`
}

/** Nothing having run is no success. */
export function exitCode({ passed, failed }: { passed: number, failed: number }): 0 | 1 {
  return failed > 0 || passed === 0 ? 1 : 0
}

function firstLines(text: string, count: number): string {
  const lines = text.trimEnd().split('\n')
  if (lines.length <= count) return lines.join('\n')
  return count === 1 ? lines[0] ?? '' : [...lines.slice(0, count), `… ${lines.length - count} more lines`].join('\n')
}

function lastLines(text: string): string {
  const lines = text.trim().split('\n')
  return lines.length <= OUTPUT_LINES ? lines.join('\n') : [`… ${lines.length - OUTPUT_LINES} lines before`, ...lines.slice(-OUTPUT_LINES)].join('\n')
}

function indent(text: string): string {
  return text.split('\n').map(line => `    ${line}`).join('\n')
}
