import type { PeakBands } from '#shared/workbench/depth'

/**
 * The band around the answer. It is worked out a moment after the answer itself; until then the last one moves along with
 * the value it stands around, so that no number ever stands without its band.
 */
export function useSteadyBand(
  bands: () => PeakBands | null,
  peaks: () => { sumpC: number; coolerInletC: number },
): ComputedRef<Pick<PeakBands, 'sumpC' | 'coolerInletC'> | null> {
  const around = shallowRef(peaks())
  watch(bands, () => {
    around.value = peaks()
  })
  return computed(() => {
    const last = bands()
    if (!last) return null
    const now = peaks()
    const move = (place: 'sumpC' | 'coolerInletC') => {
      const by = now[place] - around.value[place]
      return { low: last[place].low + by, high: last[place].high + by }
    }
    return { sumpC: move('sumpC'), coolerInletC: move('coolerInletC') }
  })
}
