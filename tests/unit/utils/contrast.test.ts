import { describe, expect, it } from 'vitest'
import { contrastRatio } from '../../../utils/contrast'
import { COLOR_PAIRS, COLORS } from '../../../utils/tokens'

describe('contrast', () => {
  // W3C, WCAG 2.2, definition of contrast ratio: the scale runs from 1 to 21. #777777 on white misses 4.5:1 by a hair,
  // 4.47 or 4.48 depending on rounding (W3C, Understanding SC 1.4.3; value from memory).
  it('agrees with the ends of the scale and with the published near miss', () => {
    expect(contrastRatio('#000000', '#FFFFFF')).toBeCloseTo(21, 6)
    expect(contrastRatio('#123456', '#123456')).toBe(1)
    expect(contrastRatio('#777777', '#FFFFFF')).toBeGreaterThan(4.46)
    expect(contrastRatio('#777777', '#FFFFFF')).toBeLessThan(4.5)
  })

  it.each((['light', 'dark'] as const).flatMap((theme) => COLOR_PAIRS.map((pair) => ({ theme, ...pair }))))(
    '$theme: $front on $back is readable as $kind',
    ({ theme, front, back, kind }) => {
      const ratio = contrastRatio(COLORS[theme][front], COLORS[theme][back])
      expect(ratio).toBeGreaterThanOrEqual(kind === 'text' ? 4.5 : 3)
    },
  )

  it('names the same colors in both themes', () => {
    expect(Object.keys(COLORS.dark)).toEqual(Object.keys(COLORS.light))
  })
})
