import { contextOf } from '#shared/score/context'
import { capoOffset } from '#shared/score/sounding'
import type { Score } from '#shared/score/types'
import { tonicOf } from '#shared/tunings/board'
import { CHART_KEYS, USUAL_OPTIONS, type ChartOptions } from './chartOptions'

/** What an arrangement says of key, capos and neck, as its chart is made for it. */
export function arrangementOptions(score: Score): ChartOptions {
  const { head } = score
  const { key } = contextOf(score, 0)
  const partial = head.capos.find(capo => capo.strings && capo.strings.length < head.strings.length)
  return {
    ...USUAL_OPTIONS,
    key: CHART_KEYS.find(each => each.key.mode === key.mode && tonicOf(each.key) === tonicOf(key))?.value ?? '',
    capo: capoOffset(head),
    partialFret: partial?.fret ?? 0, partialStrings: partial?.strings ?? [],
    length: head.instrument.scaleLength,
  }
}
