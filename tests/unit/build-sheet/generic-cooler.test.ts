import { describe, expect, it } from 'vitest'
import { createGenericCooler, GENERIC_SIZES } from '../../../shared/build-sheet/generic-cooler'
import { restateAtReferencePoint } from '../../../shared/heat'
import { AIR_CONSTRUCTIONS, AIR_POSITIONS, CoolerSchema } from '../../../shared/schemas/heat-input'

// Conductance per face area at the reference point [W/(m² K)]: judgement, as the method page states it.
const UA_PER_AREA = { 'stacked-plate': 2900, 'plate-fin': 2500, 'tube-fin': 1500 }

describe('a cooler known by kind and size only', () => {
  const sizes = ['small', 'medium', 'large'] as const
  const all = AIR_CONSTRUCTIONS.flatMap((construction) =>
    AIR_POSITIONS.flatMap((position) => sizes.map((size) => ({ construction, position, size }))),
  )

  it.each(all)(
    '$size $construction $position is one the model takes, and carries what its kind does',
    (choice) => {
      const cooler = createGenericCooler(choice)
      expect(CoolerSchema.safeParse(cooler).error?.issues).toBeUndefined()
      const { uaWK } = restateAtReferencePoint(cooler)
      const { faceAreaM2 } = GENERIC_SIZES[choice.size]
      // Rounded to whole watts of some thousands.
      expect(uaWK / (UA_PER_AREA[choice.construction] * faceAreaM2)).toBeCloseTo(1, 3)
    },
  )

  it('has a fan only where it is remote and was asked for', () => {
    const base = { construction: 'plate-fin', size: 'large' } as const
    expect(createGenericCooler({ ...base, position: 'remote', fan: true }).fanFlowM3S).toBeGreaterThan(0.1)
    expect(createGenericCooler({ ...base, position: 'remote' })).not.toHaveProperty('fanFlowM3S')
    expect(createGenericCooler({ ...base, position: 'behind-condenser', fan: true })).not.toHaveProperty(
      'fanFlowM3S',
    )
  })
})
