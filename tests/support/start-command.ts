import { spawn, type ChildProcess } from 'node:child_process'
import { cpSync, existsSync, mkdirSync, readdirSync, readFileSync, readlinkSync, symlinkSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { SOURCES } from '../../scripts/lib/build.mjs'
import { rootFolder } from '../../scripts/lib/paths.mjs'

/** Makes a checkout like this one in another place, with the packages and the build of this one. */
export function copyCheckout(folder: string): void {
  mkdirSync(folder, { recursive: true })
  for (const name of [...SOURCES, 'package.json', 'scripts', '.output']) {
    const from = join(rootFolder, name)
    if (existsSync(from)) cpSync(from, join(folder, name), { recursive: true, verbatimSymlinks: true })
  }
  symlinkSync(join(rootFolder, 'node_modules'), join(folder, 'node_modules'))
}

export interface StartCommand {
  child: ChildProcess
  /** All that it has printed so far. */
  output: () => string
  /** Waits until it prints something that fits; fails when it ends before, or takes too long. */
  until: (pattern: RegExp, timeoutMs?: number) => Promise<void>
  /** What it ended with. */
  ended: Promise<{ code: number | null; signal: NodeJS.Signals | null }>
}

/** Runs the start command of a checkout, as `npm start` does. */
export function runStart(folder: string, env: Record<string, string>): StartCommand {
  const child = spawn(process.execPath, [join(folder, 'scripts', 'start.mjs')], {
    cwd: folder,
    env: { PATH: process.env.PATH, HOME: process.env.HOME, ...env },
    stdio: ['ignore', 'pipe', 'pipe'],
  })
  let printed = ''
  for (const stream of [child.stdout, child.stderr]) {
    stream.setEncoding('utf8')
    stream.on('data', (text: string) => (printed += text))
  }
  let hasEnded = false
  const ended = new Promise<{ code: number | null; signal: NodeJS.Signals | null }>((resolve) => {
    child.once('close', (code, signal) => {
      hasEnded = true
      resolve({ code, signal })
    })
  })
  return {
    child,
    output: () => printed,
    ended,
    until: async (pattern, timeoutMs = 120_000) => {
      const deadline = Date.now() + timeoutMs
      while (!pattern.test(printed)) {
        if (hasEnded || Date.now() > deadline) {
          throw new Error(`${hasEnded ? 'ended' : 'too slow'} before it printed ${pattern}:\n${printed}`)
        }
        await sleep(50)
      }
    },
  }
}

/** The processes that work in a folder or name it, but for this one. */
export function processesOf(folder: string): { pid: number; command: string }[] {
  return readdirSync('/proc')
    .filter((name) => /^\d+$/.test(name) && Number(name) !== process.pid)
    .flatMap((name) => {
      try {
        const command = readFileSync(`/proc/${name}/cmdline`, 'utf8').replaceAll('\0', ' ').trim()
        const cwd = readlinkSync(`/proc/${name}/cwd`)
        const belongs = cwd === folder || cwd.startsWith(`${folder}/`) || command.includes(`${folder}/`)
        return belongs ? [{ pid: Number(name), command }] : []
      } catch {
        // Ended while being looked at.
        return []
      }
    })
}

/** Ends every process of a folder, as a power cut would. */
export function killAll(folder: string): void {
  for (const { pid } of processesOf(folder)) {
    try {
      process.kill(pid, 'SIGKILL')
    } catch {
      // It went with another that was killed before it.
    }
  }
}

/** Waits until no process of a folder is left. */
export async function untilNobody(folder: string, timeoutMs = 20_000): Promise<void> {
  const deadline = Date.now() + timeoutMs
  for (;;) {
    const left = processesOf(folder)
    if (left.length === 0) return
    if (Date.now() > deadline)
      throw new Error(`still there: ${left.map(({ command }) => command).join('\n')}`)
    await sleep(100)
  }
}

/** The folder that holds a checkout's cluster, as the start command noted it. */
export function clusterFolder(folder: string): string {
  return (JSON.parse(readFileSync(join(folder, '.data', 'cluster.json'), 'utf8')) as { folder: string })
    .folder
}

/** The process of the database server of a cluster. */
export function postmasterOf(cluster: string): number {
  return Number(readFileSync(join(cluster, 'postmaster.pid'), 'utf8').split('\n')[0])
}

/** A folder beside one, for moving it there. */
export function beside(folder: string, name: string): string {
  return join(dirname(folder), name)
}
