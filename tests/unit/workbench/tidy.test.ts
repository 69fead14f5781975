import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { displayUnit, fieldText } from '../../../shared/units/display'
import { tidyForField } from '../../../shared/workbench/tidy'

describe('tidyForField', () => {
  it('shows a value born in another unit in three digits', () => {
    expect(fieldText(tidyForField(20.1, 'speed', 'us'), 'speed', 'us')).toBe('45')
    expect(fieldText(tidyForField(1814, 'mass', 'us'), 'mass', 'us')).toBe('4,000')
    expect(fieldText(tidyForField(1.36, 'dragArea', 'us'), 'dragArea', 'us')).toBe('14.6')
    expect(fieldText(tidyForField(1.36, 'dragArea', 'metric'), 'dragArea', 'metric')).toBe('1.36')
  })

  it('never touches what was typed in this unit: the very same number comes back', () => {
    const typed = fc.tuple(fc.integer({ min: 1, max: 999_999 }), fc.integer({ min: 0, max: 3 }))
    fc.assert(
      fc.property(
        typed,
        fc.constantFrom(
          'mass',
          'speed',
          'temperature',
          'distance',
          'torque',
          'heatRate',
          'volumeFlow',
          'pressure',
        ),
        fc.constantFrom('us', 'metric'),
        ([digits, decimals], quantity, system) => {
          const value = displayUnit(quantity, system).fromDisplay(digits / 10 ** decimals)
          expect(tidyForField(value, quantity, system)).toBe(value)
        },
      ),
    )
  })
})
