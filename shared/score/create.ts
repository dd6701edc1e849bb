import { DEFAULT_KEY, DEFAULT_METER, DEFAULT_TEMPO } from './context'
import type { Fraction } from './fraction'
import type { Bar, Capo, Head, Instrument, Key, Meter, OpenString, RingRule, Score, Tempo } from './types'

/** 25.5 inches, 20 frets: a full-size steel-string guitar (common practice). */
export const STEEL_STRING_GUITAR: Instrument = { scaleLength: 647.7, frets: 20 }

/** String 1 first. */
export const STANDARD_TUNING: readonly OpenString[] = ['E4', 'B3', 'G3', 'D3', 'A2', 'E2'].map(pitch => ({ pitch }))

export interface NewScore {
  readonly title: string
  readonly composer?: string
  readonly arranger?: string
  readonly strings?: readonly OpenString[]
  readonly capos?: readonly Capo[]
  readonly ring?: RingRule
  readonly meter?: Meter
  readonly key?: Key
  readonly tempo?: Tempo
  /** Length of a first bar shorter than the meter. */
  readonly pickup?: Fraction
}

/** An arrangement with one empty bar (two where there is a pickup).
 * @param newId makes the bars' ids */
export function createScore(wish: NewScore, newId: () => string): Score {
  const head: Head = {
    title: wish.title, composer: wish.composer ?? '', arranger: wish.arranger ?? '', rights: '', source: '',
    ring: wish.ring ?? 'written', instrument: STEEL_STRING_GUITAR, strings: wish.strings ?? STANDARD_TUNING, capos: wish.capos ?? [],
  }
  const opening: Bar = {
    id: newId(), meter: wish.meter ?? DEFAULT_METER, key: wish.key ?? DEFAULT_KEY, tempo: wish.tempo ?? DEFAULT_TEMPO, voices: {},
    ...(wish.pickup && { length: wish.pickup }),
  }
  return { head, bars: wish.pickup ? [opening, { id: newId(), voices: {} }] : [opening] }
}
