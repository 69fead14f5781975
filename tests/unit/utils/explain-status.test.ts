import { describe, expect, it } from 'vitest'
import { ERROR_TABLE } from '../../../shared/errors'
import { explainStatus } from '../../../utils/explain-status'

describe('explainStatus', () => {
  const statuses = [...new Set(Object.values(ERROR_TABLE).map((entry) => entry.status))]

  it.each(statuses)('says for %d what to do next', (status) => {
    const explained = explainStatus(status)
    expect(explained.title).not.toMatch(/!/)
    expect(explained.advice.length).toBeGreaterThan(20)
  })

  it('offers another try only where one can help', () => {
    expect(explainStatus(503).again).toBe(true)
    expect(explainStatus(404).again).toBe(false)
    expect(explainStatus(401).signIn).toBe(true)
  })

  it('takes an unknown status for the nearest of its kind', () => {
    expect(explainStatus(418)).toEqual(explainStatus(400))
    expect(explainStatus(599)).toEqual(explainStatus(500))
    expect(explainStatus(0)).toEqual(explainStatus(500))
  })
})
