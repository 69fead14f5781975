import { GENERIC_COOLERS, heatAtReferencePoint, referenceOil, REFERENCE_POINT } from '../heat/reference-point'
import type { AirConstruction, AirCooler, AirPosition } from '../schemas/heat-input'

/**
 * A cooler known by its construction and about how large it is, for a caller who cannot say more. Rated at the common
 * reference point with the generic conductance per face area of its construction (judgement).
 */

export const GENERIC_SIZES = {
  small: { faceAreaM2: 0.026, words: 'small, about 10 × 4 in' },
  medium: { faceAreaM2: 0.046, words: 'medium, about 11 × 6½ in' },
  large: { faceAreaM2: 0.076, words: 'large, about 11 × 10½ in' },
} as const
export type GenericSize = keyof typeof GENERIC_SIZES

export const CONSTRUCTION_WORDS: Record<AirConstruction | 'in-tank', string> = {
  'stacked-plate': 'stacked plate',
  'plate-fin': 'plate and fin',
  'tube-fin': 'tube and fin',
  'in-tank': 'in the radiator tank',
}

export const POSITION_WORDS: Record<AirPosition | 'radiator-tank', string> = {
  'ahead-of-condenser': 'ahead of the condenser',
  'behind-condenser': 'between condenser and radiator',
  remote: 'remote, under the body',
  'radiator-tank': 'in the radiator tank',
}

/** A fan made for a remote core pulls air through it at about this speed [m/s]; common practice, no source. */
export const REMOTE_FAN_FACE_MPS = 3

/** A model cooler of a construction, a size class and a place. */
export function createGenericCooler(choice: {
  construction: AirConstruction
  position: AirPosition
  size: GenericSize
  fan?: boolean
}): AirCooler {
  const { faceAreaM2 } = GENERIC_SIZES[choice.size]
  const name = `${capitalize(choice.size)} ${CONSTRUCTION_WORDS[choice.construction]} cooler`
  return createGenericCore({ ...choice, faceAreaM2, name })
}

/** The same for any face [m²]. */
export function createGenericCore(choice: {
  name: string
  construction: AirConstruction
  position: AirPosition
  faceAreaM2: number
  fan?: boolean
}): AirCooler {
  const { name, construction, position, faceAreaM2 } = choice
  const { uaPerAreaWM2K, pressureDropPa } = GENERIC_COOLERS[construction]
  const heatW = heatAtReferencePoint(referenceOil(), uaPerAreaWM2K * faceAreaM2, faceAreaM2)
  return {
    name,
    construction,
    position,
    faceAreaM2,
    ...(position === 'remote' && choice.fan === true ? { fanFlowM3S: REMOTE_FAN_FACE_MPS * faceAreaM2 } : {}),
    rating: { ...REFERENCE_POINT, heatW: Math.round(heatW), pressureDropPa },
  }
}

function capitalize(word: string): string {
  return word.charAt(0).toUpperCase() + word.slice(1)
}
