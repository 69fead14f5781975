import { describe, expect, it } from 'vitest'
import { BuildListQuerySchema, STAGES } from '../../../shared/schemas/build'
import { readBuildsQuery, STAGE_WORDS, writeBuildsQuery } from '../../../utils/builds-query'

const USUAL = { search: '', stage: '', sort: 'updated', direction: 'desc', page: 1 }

describe('the address of the list of builds', () => {
  it('says nothing when everything is as usual', () => {
    expect(readBuildsQuery({})).toEqual(USUAL)
    expect(writeBuildsQuery(readBuildsQuery({}))).toEqual({})
  })

  it('says what is not as usual, and comes back the same', () => {
    const address = { search: 'wagon', stage: 'quoted', sort: 'name', direction: 'desc', page: '3' }
    expect(writeBuildsQuery(readBuildsQuery(address))).toEqual(address)
  })

  it('turns a mistyped part into the usual', () => {
    expect(readBuildsQuery({ stage: 'sold', sort: 'price', direction: 'up', page: '-2' })).toEqual(USUAL)
    expect(readBuildsQuery({ page: '1e3' }).page).toBe(1)
  })

  it('takes the first of a part said twice', () => {
    expect(readBuildsQuery({ sort: ['customer', 'name'] }).sort).toBe('customer')
  })

  it('turns from A to Z for every column but the date', () => {
    expect(readBuildsQuery({ sort: 'customer' }).direction).toBe('asc')
    expect(readBuildsQuery({ sort: 'updated' }).direction).toBe('desc')
  })

  it('is a request that the server takes, whatever is in it', () => {
    for (const stage of ['', ...STAGES]) {
      const request = writeBuildsQuery(
        readBuildsQuery({ search: 'x'.repeat(500), stage, sort: 'stage', page: '7' }),
      )
      expect(BuildListQuerySchema.safeParse(request).success).toBe(true)
    }
  })

  it('has a word for every stage', () => {
    expect(Object.keys(STAGE_WORDS)).toEqual([...STAGES])
  })
})
