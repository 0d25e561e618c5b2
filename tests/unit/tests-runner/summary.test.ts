import { describe, expect, it } from 'vitest'
import type { Outcome } from '#tests/runner/outcome'
import { countOutcomes, exitCode, lastLine, stageFailures, stageLine } from '#tests/runner/summary'

const passed: Outcome = { title: 'adds', file: 'a.test.ts', hasPassed: true, message: '' }
const failed: Outcome = { title: 'takes away', file: 'a.test.ts', hasPassed: false, message: 'expected 1 to be 2' }

describe('summary', () => {
  it('ends with one exact line', () => {
    expect(lastLine(countOutcomes([passed, passed, failed]))).toBe('2 passed, 1 failed')
  })

  it('is a success only when something ran and all of it passed', () => {
    expect(exitCode({ passed: 3, failed: 0 })).toBe(0)
    expect(exitCode({ passed: 3, failed: 1 })).toBe(1)
    expect(exitCode({ passed: 0, failed: 0 })).toBe(1)
  })

  it('tells the seconds of a stage', () => {
    expect(stageLine({ name: 'unit', seconds: 12.34, outcomes: [passed], output: '' })).toBe('unit           12.3 s   1 passed')
  })

  it('is quiet about a stage that passed', () => {
    expect(stageFailures({ name: 'unit', seconds: 1, outcomes: [passed], output: 'chatter' })).toBe('')
  })

  it('names the file, the test and what it said, without the rest of the output', () => {
    const told = stageFailures({ name: 'unit', seconds: 1, outcomes: [passed, failed], output: 'chatter' })
    expect(told).toBe('  ✗ a.test.ts: takes away\n    expected 1 to be 2')
  })

  it('shows once what vitest printed about its failures: only that says what was expected', () => {
    const output = 'chatter\n⎯⎯⎯⎯⎯⎯⎯ Failed Tests 1 ⎯⎯⎯⎯⎯⎯⎯\n- Expected\n+ Received\n'
    const told = stageFailures({ name: 'unit', seconds: 1, outcomes: [passed, { ...failed, message: 'not equal\n    at a.test.ts:3' }], output })
    expect(told).toBe('  ✗ a.test.ts: takes away\n    not equal\n    ⎯⎯⎯⎯⎯⎯⎯ Failed Tests 1 ⎯⎯⎯⎯⎯⎯⎯\n    - Expected\n    + Received')
  })

  it('shows the end of the output when the stage itself failed', () => {
    const output = Array.from({ length: 300 }, (_, index) => `line ${index}`).join('\n')
    const told = stageFailures({ name: 'lint', seconds: 1, outcomes: [{ ...failed, file: undefined }], output })
    expect(told).toContain('line 299')
    expect(told).toContain('… 100 lines before')
    expect(told).not.toContain('line 99\n')
  })
})
