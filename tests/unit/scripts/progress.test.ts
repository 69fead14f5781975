import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { cleanLine, createProgress } from '../../../scripts/lib/progress.mjs'

describe('the progress lines', () => {
  beforeEach(() => void vi.useFakeTimers())
  afterEach(() => void vi.useRealTimers())

  it('says something at least every ten seconds while a step lasts', async () => {
    const lines: string[] = []
    const progress = createProgress({ write: (line) => void lines.push(line), now: () => Date.now() })
    const step = progress.step('Building', async (report) => {
      report('module 1 of 3')
      await new Promise((resolve) => setTimeout(resolve, 25_000))
      return 'built'
    })
    await vi.advanceTimersByTimeAsync(25_000)
    expect(await step).toBe('built')
    expect(lines).toEqual([
      '[   0.0 s] Building …',
      '[  10.0 s] Building: still at it after 10.0 s: module 1 of 3',
      '[  20.0 s] Building: still at it after 20.0 s: module 1 of 3',
      '[  25.0 s] Building: done in 25.0 s',
    ])
  })

  it('says that a step failed, hands the error on, and falls silent', async () => {
    const lines: string[] = []
    const progress = createProgress({ write: (line) => void lines.push(line), now: () => Date.now() })
    await expect(progress.step('Trying', () => Promise.reject(new Error('no')))).rejects.toThrow('no')
    await vi.advanceTimersByTimeAsync(60_000)
    expect(lines).toEqual(['[   0.0 s] Trying …', '[   0.0 s] Trying: failed after 0.0 s'])
  })

  it('makes a program’s line fit', () => {
    const escape = String.fromCharCode(27)
    expect(cleanLine(`${escape}[32m✓ built${escape}[39m\tin 3 s \r`)).toBe('✓ built in 3 s')
    expect(cleanLine('x'.repeat(200))).toHaveLength(90)
  })
})
