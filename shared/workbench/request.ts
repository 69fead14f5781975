import type { BuildSheet } from '../schemas/sheet'
import type { CatalogueCooler } from '../schemas/catalogue-cooler'
import type { Control } from '../schemas/control'
import type { AirPosition, Duty, Load } from '../schemas/heat-input'
import type { Limits } from '../schemas/limits'
import type { SetupChange } from '../schemas/setup'

/** A set-up as the workbench computes it. */
export interface WorkbenchSetup {
  id: string
  name: string
  change: SetupChange
}

/** All that an answer depends on. Plain data, so that it can cross into a worker. */
export interface WorkbenchRequest {
  sheet: BuildSheet
  control: Control
  limits: Limits
  scenario: { load: Load; duty: Duty }
  /** The set-up whose answer is shown. */
  setup: WorkbenchSetup
  /** Drawn beside it; at most three are. */
  others: WorkbenchSetup[]
}

/** What the deeper look needs besides. */
export interface DepthRequest extends WorkbenchRequest {
  /** The parts a shop can buy; null while they are not known yet, then they are not tried. */
  coolers: CatalogueCooler[] | null
  /** Where a part in air would be mounted; ahead of the condenser unless chosen otherwise. */
  mountAt?: AirPosition
}

/** Set-ups drawn beside the present one. */
export const MOST_OTHERS = 3
