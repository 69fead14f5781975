import { describe, expect, it } from 'vitest'
import { matchesLock } from '../../../scripts/lib/install.mjs'

const lock = (packages: Record<string, object>) => JSON.stringify({ packages: { '': {}, ...packages } })
const wanted = lock({
  'node_modules/a': { version: '1.0.0', integrity: 'sha512-a' },
  'node_modules/for-another-system': { version: '2.0.0', integrity: 'sha512-b', optional: true },
})

describe('the judgement of an installation', () => {
  it('takes what the lock file asks for, without builds for other systems', () => {
    expect(matchesLock(wanted, lock({ 'node_modules/a': { version: '1.0.0', integrity: 'sha512-a' } }))).toBe(
      true,
    )
    expect(matchesLock(wanted, wanted)).toBe(true)
  })

  it.each([
    ['a missing package', lock({})],
    ['another version', lock({ 'node_modules/a': { version: '1.0.1', integrity: 'sha512-a' } })],
    [
      'another content of the same version',
      lock({ 'node_modules/a': { version: '1.0.0', integrity: 'sha512-x' } }),
    ],
    [
      'a package too many',
      lock({
        'node_modules/a': { version: '1.0.0', integrity: 'sha512-a' },
        'node_modules/b': { version: '1.0.0' },
      }),
    ],
    ['an account cut off half-way', '{"packages": {'],
  ])('refuses %s', (_, installed) => {
    expect(matchesLock(wanted, installed)).toBe(false)
  })
})
