// @ts-check
import { STEP_NAMES } from './checks.mjs'
import { Advice } from './packages.mjs'

/**
 * Reads what follows `npm test --`: `--only unit,db` for some of the steps, `--deep` for the tests that take minutes as
 * well, and words that are handed to vitest to choose files.
 *
 * @param {readonly string[]} words
 * @returns {{ steps: import('./checks.mjs').StepName[], filters: string[] }}
 */
export function parseTestArguments(words) {
  let only
  let deep = false
  const filters = []
  const rest = [...words]
  for (let word = rest.shift(); word !== undefined; word = rest.shift()) {
    if (word === '--deep') deep = true
    else if (word === '--only') only = readSteps(rest.shift())
    else if (word.startsWith('--only=')) only = readSteps(word.slice('--only='.length))
    else if (word.startsWith('-')) {
      throw new Advice(`${word} is not known. Known are --only ${STEP_NAMES.join(',')} and --deep.`)
    } else filters.push(word)
  }
  const wanted = only ?? STEP_NAMES.filter((name) => name !== 'deep')
  return { steps: STEP_NAMES.filter((name) => wanted.includes(name) || (deep && name === 'deep')), filters }
}

/** @param {string | undefined} text */
function readSteps(text) {
  const names = (text ?? '').split(',').filter((name) => name !== '')
  const unknown = names.filter((name) => !STEP_NAMES.some((known) => known === name))
  if (names.length === 0 || unknown.length > 0) {
    throw new Advice(
      `--only takes steps from ${STEP_NAMES.join(',')}${unknown.length > 0 ? `, and ${unknown.join(', ')} is none` : ''}; for example --only unit,db`,
    )
  }
  return names
}
