import fc from 'fast-check'
import {
  createGenericCooler,
  GENERIC_SIZES,
  type GenericSize,
} from '../../../shared/build-sheet/generic-cooler'
import { createGenericTank } from '../../../shared/cooling-loop/generic-tank'
import { AIR_CONSTRUCTIONS, AIR_POSITIONS, type Cooler } from '../../../shared/schemas/heat-input'

/** A cooler the model takes, of any kind and place. */
const anyCooler: fc.Arbitrary<Cooler> = fc.oneof(
  { weight: 1, arbitrary: fc.constant<Cooler>(createGenericTank()) },
  {
    weight: 4,
    arbitrary: fc
      .record({
        construction: fc.constantFrom(...AIR_CONSTRUCTIONS),
        position: fc.constantFrom(...AIR_POSITIONS),
        size: fc.constantFrom(...(Object.keys(GENERIC_SIZES) as GenericSize[])),
        fan: fc.boolean(),
      })
      .map((choice): Cooler => createGenericCooler(choice)),
  },
)

/** A loop of up to six, each with a name of its own, in series and parallel as it comes. */
export const anyLoop: fc.Arbitrary<Cooler[]> = fc
  .array(fc.tuple(anyCooler, fc.option(fc.boolean(), { nil: undefined })), { maxLength: 6 })
  .map((coolers) =>
    coolers.map(([cooler, parallel], index) => ({
      ...cooler,
      name: `Cooler ${index}`,
      ...(parallel === undefined ? {} : { parallelWithPrevious: parallel }),
    })),
  )
