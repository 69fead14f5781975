import { displayUnit, type Quantity, type UnitSystem } from '../units/display'

/** More digits than anybody types; a number with more was born in another unit. */
const MOST_TYPED_DIGITS = 8

/**
 * The number a field shows for a value. What a person typed in this unit comes back exactly; a value born in another unit
 * ("20.1 m/s") is shown as it is printed everywhere else, in three significant digits, instead of as 44.9624 mph.
 * @returns the value to show, in SI
 */
export function tidyForField(value: number, quantity: Quantity, system: UnitSystem): number {
  const { toDisplay, fromDisplay } = displayUnit(quantity, system)
  const shown = toDisplay(value)
  // The last digits of a double are what a conversion there and back leaves behind.
  const [mantissa = ''] = Number(shown.toPrecision(12)).toExponential().split('e')
  if (mantissa.replace(/\D/g, '').length <= MOST_TYPED_DIGITS) return value
  return fromDisplay(Number(shown.toPrecision(3)))
}
