import { findSheetValue, removeSheetBranch, setSheetValue } from '../build-sheet/sheet'
import type { BuildSheet } from '../schemas/sheet'
import type { AdviceRequest, RemedyWhat } from './types'

/** What a remedy may change of a request. */
export type Changeable = Pick<AdviceRequest, 'sheet' | 'scenario' | 'setup'>

/**
 * Lays a remedy over a request: what the workbench does when somebody says "do it", and what is computed before.
 * @param request - is not changed
 * @param what - of a remedy
 */
export function applyRemedy(request: Changeable, what: RemedyWhat): Changeable {
  const { sheet, scenario, setup } = request
  const kept = setup === undefined ? {} : { setup }
  switch (what.kind) {
    case 'set-up':
      return { sheet, scenario, setup: { ...setup, change: { ...setup?.change, ...what.change } } }
    case 'sheet':
      return { sheet: patchSheet(sheet, what), scenario, ...kept }
    case 'scenario':
      return {
        sheet,
        ...kept,
        scenario: { ...scenario, load: what.load ?? scenario.load, duty: what.duty ?? scenario.duty },
      }
  }
}

/** A value put in by advice is nobody's measurement: it keeps no spread and no typed text of the one it replaces. */
function patchSheet(sheet: BuildSheet, what: Extract<RemedyWhat, { kind: 'sheet' }>): BuildSheet {
  const cleared = (what.remove ?? []).reduce(removeSheetBranch, sheet)
  return what.values.reduce((changed, { path, value }) => {
    const before = findSheetValue(changed, path)
    return before?.value === value ? changed : setSheetValue(changed, { path, value, origin: 'typical' })
  }, cleared)
}
