import { formatQuantity, formatRise, quantityParts } from '#shared/units/display'
import type { Quantity, UnitSystem } from '#shared/units/display'
import { useSessionStore } from '~/stores/session'

/**
 * The person's units, and printing in them. A signed-in person's own choice stands first, then the choice made on this
 * device, then the shop's, then °F.
 */
export function useUnits() {
  const session = useSessionStore()

  const system = computed<UnitSystem>(
    () => session.me?.user.unitSystem ?? session.unitsChoice ?? session.me?.shop.unitSystem ?? 'us',
  )

  /** Shows everything in other units at once, and remembers it: on this device, and with the person when signed in. */
  async function setSystem(next: UnitSystem): Promise<void> {
    session.unitsChoice = next
    await session.remember({ unitSystem: next })
  }

  return {
    system,
    setSystem,
    /** "212 °F". */
    format: (value: number | null | undefined, quantity: Quantity) =>
      formatQuantity(value, quantity, system.value),
    /** "+18 °F". */
    formatRise: (riseK: number | null | undefined) => formatRise(riseK, system.value),
    /** Figure and unit apart. */
    parts: (value: number | null | undefined, quantity: Quantity) =>
      quantityParts(value, quantity, system.value),
  }
}
