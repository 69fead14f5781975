import type { EvaluateQuantity } from '#shared/units/parse-quantity'

/** One load for every field of the page. It holds no state of anybody: the evaluator is a pure function. */
let loading: Promise<EvaluateQuantity> | undefined

function loadEvaluator(): Promise<EvaluateQuantity> {
  loading ??= import('#shared/quantities/evaluate').then(
    ({ evaluateQuantity }) => evaluateQuantity,
    (error: unknown) => {
      // Forgotten, so that the next keystroke tries again: the network may be back by then.
      loading = undefined
      throw error
    },
  )
  return loading
}

/**
 * The part that reads units and sums. It brings a library along, so it is fetched at the first keystroke and never before;
 * `state` says whether it is there.
 */
export function useQuantityEvaluator() {
  const evaluate = shallowRef<EvaluateQuantity>()
  const state = ref<'absent' | 'loading' | 'ready' | 'failed'>('absent')

  async function load(): Promise<void> {
    if (state.value === 'ready' || state.value === 'loading') return
    state.value = 'loading'
    try {
      evaluate.value = await loadEvaluator()
      state.value = 'ready'
    } catch {
      state.value = 'failed'
    }
  }

  return { evaluate, state, load }
}
