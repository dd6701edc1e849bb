import { contextOf } from '#shared/score/context'
import { capoOffset } from '#shared/score/sounding'
import type { Score } from '#shared/score/types'
import { tonicOf } from '#shared/tunings/board'
import type { ChartRequest } from '#shared/tunings/chart'
import { catalogue } from '#shared/tunings/catalogue'
import { melodyOf } from '#shared/tunings/melody'
import type { RankingRequest } from '#shared/tunings/rank'
import { usualSet } from '#shared/tunings/sets'
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

/** What is asked when tunings are ranked for an arrangement's own notes; a problem where it has none. */
export function rankingOf(score: Score): RankingRequest | { readonly problem: string } {
  const melody = melodyOf(score)
  if ('problem' in melody) return melody
  const { strings, instrument } = score.head
  return { melody, tunings: catalogue, from: strings, set: usualSet(strings), scaleLength: instrument.scaleLength, frets: instrument.frets, keep: 20, keepOfOne: 2 }
}

/** What the options can't say of an arrangement: its neck, several partial capos, a key of six flats. What a person tries on the chart goes before. */
export function arrangementRequest(score: Score, tried: Partial<ChartOptions>): Pick<ChartRequest, 'instrument'> & Partial<ChartRequest> {
  const { head } = score
  const isTried = (...fields: readonly (keyof ChartOptions)[]) => fields.some(field => tried[field] !== undefined)
  return {
    instrument: { ...head.instrument, scaleLength: tried.length ?? head.instrument.scaleLength },
    ...(!isTried('capo', 'partialFret', 'partialStrings') && { capos: head.capos }),
    ...(!isTried('key') && { key: contextOf(score, 0).key }),
  }
}
