import { JUDGEMENT_WORDS } from '#shared/build-sheet/limits'
import type { Judgement } from '#shared/schemas/limits'
import type { ColorName } from './tokens'

/** How each step of the ladder looks: its word, the weight of line that belongs to it (px), and its color last. */
export const LADDER: Readonly<Record<Judgement, { word: string; weightPx: number; color: ColorName }>> = {
  fine: { word: JUDGEMENT_WORDS.fine, weightPx: 1, color: 'heat-fine' },
  watch: { word: JUDGEMENT_WORDS.watch, weightPx: 2, color: 'heat-watch' },
  'ease-off': { word: JUDGEMENT_WORDS['ease-off'], weightPx: 3, color: 'heat-ease' },
  stop: { word: JUDGEMENT_WORDS.stop, weightPx: 4, color: 'heat-stop' },
}
