import { describe, expect, it } from 'vitest'
import { safeReturnAddress } from '../../../utils/return-address'

describe('safeReturnAddress', () => {
  it('goes back to a page of this program', () => {
    expect(safeReturnAddress('/builds?search=wagon&page=2')).toBe('/builds?search=wagon&page=2')
    expect(safeReturnAddress('/method#cautions')).toBe('/method#cautions')
  })

  it.each([
    'https://elsewhere.test/',
    '//elsewhere.test/builds',
    '/\\elsewhere.test',
    '/\t/elsewhere.test',
    'javascript:alert(1)',
    'builds',
    '',
    '/sign-in?returnTo=/builds',
    undefined,
    null,
    ['/builds', '/method'],
    42,
  ])('goes to the builds instead of to %s', (wanted) => {
    expect(safeReturnAddress(wanted)).toBe('/builds')
  })
})
