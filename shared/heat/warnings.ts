import type { HeatInput } from '../schemas/heat-input'
import type { Truck } from './truck'
import type { Estimate, Warning, WarningCode } from './types'

export function listWarningCodes(): readonly WarningCode[] {
  return []
}
export function collectWarnings(
  _input: HeatInput,
  _truck: Truck,
  _answer: Omit<Estimate, 'warnings'>,
): Warning[] {
  return []
}
