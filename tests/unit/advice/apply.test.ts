import { describe, expect, it } from 'vitest'
import { applyRemedy } from '../../../shared/advice'
import { findSheetValue } from '../../../shared/build-sheet/sheet'
import { requestFor } from './requests'

describe('a remedy laid over a request', () => {
  it('changes a set-up where they meet, and keeps the rest of it', () => {
    const request = requestFor({ change: { topGear: 3, shiftStyle: 'economy' } })
    const changed = applyRemedy(request, { kind: 'set-up', change: { topGear: 2, speedMps: 17 } })
    expect(changed.setup).toEqual({ change: { topGear: 2, shiftStyle: 'economy', speedMps: 17 } })
    expect(changed.sheet).toBe(request.sheet)
  })

  it('puts values on the sheet as nobody’s measurement, and takes branches off it', () => {
    const path = 'converter.stallRpm'
    const request = requestFor({
      values: [{ path, value: 1900, origin: 'measured', typed: '1,900', unit: 'rpm', relativeSpread: 0.01 }],
    })
    const { sheet } = applyRemedy(request, {
      kind: 'sheet',
      values: [{ path, value: 2000 }],
      remove: ['cooling.feed'],
    })
    expect(findSheetValue(sheet, path)).toEqual({ path, value: 2000, origin: 'typical' })
    expect(findSheetValue(sheet, 'cooling.feed.openFlowM3S')).toBeUndefined()
    expect(findSheetValue(request.sheet, path)?.value).toBe(1900)
  })

  it('leaves a value alone that is as it should be', () => {
    const path = 'converter.stallRpm'
    const request = requestFor({ values: [{ path, value: 1900, origin: 'measured' }] })
    const { sheet } = applyRemedy(request, { kind: 'sheet', values: [{ path, value: 1900 }] })
    expect(findSheetValue(sheet, path)?.origin).toBe('measured')
  })

  it('replaces load or drive cycle, whichever it names', () => {
    const request = requestFor()
    const load = { trailerMassKg: 900 }
    const changed = applyRemedy(request, { kind: 'scenario', load })
    expect(changed.scenario).toEqual({ load, duty: request.scenario.duty })
  })
})
