import { spawn } from 'node:child_process'
import { once } from 'node:events'
import { describe, expect, it } from 'vitest'
import { judgeStartFailure } from '../../../scripts/lib/cluster.mjs'
import { isAlive, parseStat, processMark, stillRuns } from '../../../scripts/lib/processes.mjs'
import { judgeLock, parsePostmasterPid } from '../../../scripts/lib/postmaster.mjs'

describe('telling processes apart', () => {
  it('knows itself, and nobody of an impossible number', () => {
    expect(isAlive(process.pid)).toBe(true)
    expect(stillRuns({ pid: process.pid, mark: processMark(process.pid) })).toBe(true)
    expect(isAlive(0)).toBe(false)
    expect(isAlive(Number.NaN)).toBe(false)
    expect(processMark(2 ** 30)).toBeUndefined()
  })

  it('does not take a later process of the same number for the earlier one', () => {
    expect(stillRuns({ pid: process.pid, mark: 'another-boot 1' })).toBe(false)
    expect(stillRuns({ pid: process.pid })).toBe(false)
    expect(stillRuns(undefined)).toBe(false)
  })

  it('knows that one has ended', async () => {
    const child = spawn(process.execPath, ['-e', 'setTimeout(() => {}, 60000)'])
    const noted = { pid: child.pid ?? 0, mark: processMark(child.pid ?? 0) }
    expect(stillRuns(noted)).toBe(true)
    child.kill('SIGKILL')
    await once(child, 'exit')
    expect(stillRuns(noted)).toBe(false)
  })

  it('reads the start time past a name that holds spaces and parentheses', () => {
    const fields = Array.from({ length: 50 }, (_, index) => String(index + 4))
    expect(parseStat(`12 (a) b (c) S ${fields.join(' ')}`, 'boot')).toBe('boot 22')
    expect(parseStat(`12 (a) Z ${fields.join(' ')}`, 'boot')).toBeUndefined()
  })
})

describe('the lock file of a database server', () => {
  it('names the process, the folder and the port', () => {
    const text = '4711\n/somewhere/postgres\n1700000000\n25432\n\n127.0.0.1\n  12 34\nready   \n'
    expect(parsePostmasterPid(text)).toEqual({ pid: 4711, folder: '/somewhere/postgres', port: 25_432 })
    expect(parsePostmasterPid('')).toEqual({ pid: 0, folder: '', port: 0 })
  })

  it.each([
    ['the process is gone', { alive: false, sameFolder: undefined, commandLine: undefined }, 'stale'],
    ['it serves this folder', { alive: true, sameFolder: true, commandLine: 'postgres' }, 'serving'],
    [
      'it is the server of a copy of this folder',
      { alive: true, sameFolder: false, commandLine: 'postgres' },
      'stale',
    ],
    [
      'its number went to another program',
      { alive: true, sameFolder: undefined, commandLine: 'sleep 9' },
      'stale',
    ],
    [
      'it may be a server, and cannot be looked at',
      { alive: true, sameFolder: undefined, commandLine: 'postgres -D x' },
      'unclear',
    ],
    [
      'nothing can be learned of it',
      { alive: true, sameFolder: undefined, commandLine: undefined },
      'unclear',
    ],
  ])('is judged when %s', (_, seen, judgement) => {
    expect(judgeLock(seen)).toBe(judgement)
  })

  it.each([
    ['LOG:  could not bind IPv4 address "127.0.0.1": Address already in use', 'port'],
    ['FATAL:  pre-existing shared memory block (key 1, ID 2) is still in use', 'wait'],
    [
      'FATAL:  lock file "postmaster.pid" already exists\nHINT:  Is another postmaster (PID 1) running',
      'wait',
    ],
    ['FATAL:  could not load server certificate file', 'other'],
  ])('decides from "%s" what to do next', (log, kind) => {
    expect(judgeStartFailure(log)).toBe(kind)
  })
})
