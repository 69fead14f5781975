import { v7 as createId } from 'uuid'
import { createDefaultFacts, createSheetFromFacts } from '../../shared/build-sheet'
import type { BuildCreate } from '../../shared/schemas/build'
import type { ScenarioCreate } from '../../shared/schemas/scenario'
import type { SetupCreate } from '../../shared/schemas/setup'

/** A new build as the card for the phone call sends it, with ids of its own. */
export function draftBuild(name = 'Test truck'): BuildCreate {
  const { sheet, control, limits, scenario } = createSheetFromFacts(createDefaultFacts('classic-4x4'))
  return {
    id: createId(),
    name,
    customer: { id: createId(), name: 'Test Customer', phone: '555-0100', email: 'somebody@example.test' },
    sheet,
    control,
    limits,
    scenario: { id: createId(), ...scenario },
  }
}

export function draftScenario(name = 'Another hill'): ScenarioCreate {
  const { load, duty } = draftBuild().scenario
  return { id: createId(), name, load, duty }
}

export function draftSetup(name = 'Slower'): SetupCreate {
  return { id: createId(), name, change: { speedMps: 15, shiftStyle: 'tow' } }
}
