import { execFileSync } from 'node:child_process'

/** GNU units as an outside witness. Not every machine has it: `available` says, and stored values stand in. */
export const gnuUnits = (() => {
  const run = (args: string[]) =>
    execFileSync('units', args, { encoding: 'utf8', stdio: ['ignore', 'pipe', 'ignore'] })
  let available = false
  try {
    available = run(['--version']).startsWith('GNU Units')
  } catch {
    available = false
  }
  return {
    available,
    /** `convert('20 psi', 'kPa')`. */
    convert: (from: string, to: string) => Number(run(['-t', '-o', '%.15g', from, to])),
  }
})()
