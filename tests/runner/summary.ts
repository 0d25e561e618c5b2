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
  const told = failures.map(failure => `  ✗ ${failure.file ? `${failure.file}: ` : ''}${failure.title}\n${indent(firstLines(failure.message))}`)
  // Only a failure of the whole stage needs all that was printed: single tests speak for themselves.
  const rest = failures.some(failure => failure.file === undefined) && output.trim() !== '' ? [indent(lastLines(output))] : []
  return [...told, ...rest].join('\n')
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

function firstLines(text: string): string {
  const lines = text.trimEnd().split('\n')
  return lines.length <= MESSAGE_LINES ? lines.join('\n') : [...lines.slice(0, MESSAGE_LINES), `… ${lines.length - MESSAGE_LINES} more lines`].join('\n')
}

function lastLines(text: string): string {
  const lines = text.trim().split('\n')
  return lines.length <= OUTPUT_LINES ? lines.join('\n') : [`… ${lines.length - OUTPUT_LINES} lines before`, ...lines.slice(-OUTPUT_LINES)].join('\n')
}

function indent(text: string): string {
  return text.split('\n').map(line => `    ${line}`).join('\n')
}
