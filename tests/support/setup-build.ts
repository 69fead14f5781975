import { ensureBuild } from '../../scripts/lib/build.mjs'
import { rootFolder } from '../../scripts/lib/paths.mjs'
import { createProgress } from '../../scripts/lib/progress.mjs'

/** Runs once before the tests that need the served application: builds it unless the build is of these sources. */
export default async function setupBuild(): Promise<void> {
  if (process.env.LONGPULL_TEST_BUILT === '1') return
  await ensureBuild({ root: rootFolder, progress: createProgress() })
}
