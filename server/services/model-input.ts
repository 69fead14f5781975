import { deriveBuild, deriveInputs, listIssues, type DerivedInputs } from '#shared/build-sheet'
import { AppError } from '#shared/errors'
import type { Build } from '#shared/schemas/build'
import { HeatInputSchema } from '#shared/schemas/heat-input'
import type { Scenario } from '#shared/schemas/scenario'
import type { Setup, SetupChange } from '#shared/schemas/setup'
import type { BuildSheet } from '#shared/schemas/sheet'

/** @throws bad_input when the truck has fewer gears than the set-up's top gear */
export function checkSetupChange(sheet: BuildSheet, { topGear }: SetupChange): void {
  const gears = deriveBuild(sheet).transmission.gears.length
  if (topGear !== undefined && topGear > gears)
    throw new AppError('bad_input', {
      issues: [
        { path: 'change.topGear', message: `the transmission has ${gears} gears: must be at most ${gears}` },
      ],
    })
}

/**
 * The inputs a result is computed from, checked as a caller's own input is: what is stored can be sent to the estimate
 * call again and gives the same answer.
 */
export function deriveCheckedInputs(
  build: Pick<Build, 'sheet' | 'control'>,
  setup: Setup,
  scenario: Scenario,
): DerivedInputs {
  const inputs = deriveInputs({ sheet: build.sheet, control: build.control, setup, scenario })
  const checked = HeatInputSchema.safeParse(inputs.judged)
  if (!checked.success) throw new AppError('bad_input', { issues: listIssues(checked.error) })
  return inputs
}
