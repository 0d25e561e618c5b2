import { describe, expect, it } from 'vitest'
import { SKIPPED } from '#tests/runner/outcome'
import { readPlaywrightReport } from '#tests/runner/playwright-report'
import { readVitestReport } from '#tests/runner/vitest-report'

function vitestFile(over: Record<string, unknown> = {}) {
  return { name: '/clone/tests/unit/a.test.ts', status: 'passed', message: '', assertionResults: [], ...over }
}

describe('vitest report', () => {
  it('joins the titles around a test and names its file from the root', () => {
    const [outcome] = readVitestReport({
      testResults: [vitestFile({ assertionResults: [{ ancestorTitles: ['[house.4] take up', 'twice'], title: 'one wins', status: 'passed', failureMessages: [] }] })],
    }, '/clone')
    expect(outcome).toEqual({ title: '[house.4] take up › twice › one wins', file: 'tests/unit/a.test.ts', hasPassed: true, message: '' })
  })

  it('takes the colours out of a failure', () => {
    const [outcome] = readVitestReport({
      testResults: [vitestFile({ status: 'failed', assertionResults: [{ ancestorTitles: [], title: 'x', status: 'failed', failureMessages: ['\u001B[31mexpected 1\u001B[39m'] }] })],
    }, '/clone')
    expect(outcome).toMatchObject({ hasPassed: false, message: 'expected 1' })
  })

  it.each(['skipped', 'pending', 'todo', 'disabled'])('counts a %s test as failed', (status) => {
    const [outcome] = readVitestReport({
      testResults: [vitestFile({ assertionResults: [{ ancestorTitles: [], title: 'x', status, failureMessages: [] }] })],
    }, '/clone')
    expect(outcome).toMatchObject({ hasPassed: false, message: SKIPPED })
  })

  it('makes a file that did not load one failure', () => {
    const outcomes = readVitestReport({ testResults: [vitestFile({ status: 'failed', message: 'Cannot find module' })] }, '/clone')
    expect(outcomes).toEqual([{ title: 'tests/unit/a.test.ts', file: 'tests/unit/a.test.ts', hasPassed: false, message: 'Cannot find module' }])
  })

  it('refuses what is no report', () => {
    expect(() => readVitestReport({ results: [] }, '/clone')).toThrow()
  })
})

describe('Playwright report', () => {
  const spec = (status: string, errors: unknown[] = []) => ({ title: 'asks', file: 'ask.spec.ts', tests: [{ status, results: [{ errors }] }] })
  const report = (specs: unknown[], errors: unknown[] = []) => ({
    suites: [{ title: 'ask.spec.ts', specs: [], suites: [{ title: '[house.2] a question', specs }] }], errors,
  })

  it('joins titles below the file', () => {
    expect(readPlaywrightReport(report([spec('expected')]), 'tests/browser')).toEqual([
      { title: '[house.2] a question › asks', file: 'tests/browser/ask.spec.ts', hasPassed: true, message: '' },
    ])
  })

  it('does not let a test pass on a second try', () => {
    expect(readPlaywrightReport(report([spec('flaky', [{ message: 'timed out' }])]), 'tests/browser')[0]).toMatchObject({ hasPassed: false, message: 'timed out' })
  })

  it('counts a skipped test as failed', () => {
    expect(readPlaywrightReport(report([spec('skipped')]), 'tests/browser')[0]).toMatchObject({ hasPassed: false, message: SKIPPED })
  })

  it('counts an error outside any test', () => {
    expect(readPlaywrightReport(report([], [{ message: 'set-up failed' }]), 'tests/browser')).toEqual([
      { title: 'outside any test', file: undefined, hasPassed: false, message: 'set-up failed' },
    ])
  })
})
