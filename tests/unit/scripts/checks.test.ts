import { describe, expect, it } from 'vitest'
import { closingLine, STEP_NAMES, sumTallies, tallyReport } from '../../../scripts/lib/checks.mjs'
import { parseTestArguments } from '../../../scripts/lib/test-arguments.mjs'

const report = (...files: { status: string; tests: string[] }[]) =>
  JSON.stringify({
    testResults: files.map(({ status, tests }) => ({
      status,
      assertionResults: tests.map((test) => ({ status: test })),
    })),
  })

describe('the count of the tests', () => {
  it('counts each test', () => {
    const text = report(
      { status: 'passed', tests: ['passed', 'passed', 'pending'] },
      { status: 'failed', tests: ['passed', 'failed'] },
    )
    expect(tallyReport(text, 1)).toEqual({ passed: 3, failed: 1, skipped: 1 })
  })

  it.each([
    ['no report', undefined, 1],
    [
      'a file that could not be loaded',
      report({ status: 'failed', tests: [] }, { status: 'passed', tests: ['passed'] }),
      1,
    ],
    ['a run that ended badly though each test passed', report({ status: 'passed', tests: ['passed'] }), 1],
    ['a run that was killed', report({ status: 'passed', tests: ['passed'] }), null],
    ['a run without any test', report(), 0],
  ])('counts %s as a failure', (_, text, code) => {
    expect(tallyReport(text, code).failed).toBe(1)
  })

  it('closes with one line', () => {
    const sum = sumTallies([
      { passed: 2, failed: 0, skipped: 0 },
      { passed: 3, failed: 1, skipped: 0 },
    ])
    expect(closingLine(sum)).toBe('5 passed, 1 failed')
    expect(closingLine({ ...sum, skipped: 2 })).toBe('5 passed, 1 failed, 2 skipped')
  })
})

describe('the words after npm test', () => {
  it('runs everything but the deep tests when there are none', () => {
    expect(parseTestArguments([])).toEqual({
      steps: STEP_NAMES.filter((name) => name !== 'deep'),
      filters: [],
    })
    expect(parseTestArguments(['--deep']).steps).toEqual(STEP_NAMES)
  })

  it('picks steps in their order, and files by the words left over', () => {
    expect(parseTestArguments(['--only', 'db,unit', 'sessions'])).toEqual({
      steps: ['unit', 'db'],
      filters: ['sessions'],
    })
    expect(parseTestArguments(['--only=lint', '--deep']).steps).toEqual(['lint', 'deep'])
  })

  it('says what it knows when it does not know a word', () => {
    expect(() => parseTestArguments(['--only', 'units'])).toThrow(/units is none/)
    expect(() => parseTestArguments(['--only'])).toThrow(/for example --only unit,db/)
    expect(() => parseTestArguments(['--fast'])).toThrow(/--fast is not known/)
  })
})
