// @ts-check
/** `npm run check`: the checks and fast tests before a commit; needs no server. */
import { closingLine, runStep, sumTallies } from './lib/checks.mjs'
import { ensurePackages } from './lib/install.mjs'
import { rootFolder as root } from './lib/paths.mjs'
import { createProgress } from './lib/progress.mjs'

const progress = createProgress()
await ensurePackages({ root, progress })
const tallies = []
for (const name of /** @type {const} */ (['format', 'lint', 'types', 'unused', 'unit'])) {
  tallies.push(await runStep(name, { root, progress }))
}
const tally = sumTallies(tallies)
progress.write('')
progress.write(closingLine(tally))
process.exitCode = tally.failed === 0 ? 0 : 1
