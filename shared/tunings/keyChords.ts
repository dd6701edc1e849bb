import { Chord, Key as TonalKey } from 'tonal'
import { spell } from '../score/pitch'
import type { Key } from '../score/types'
import { tonicOf } from './board'
import { chromaOfNote, plainNote, shownNote } from './notes'

/** A chord to look for on the neck. */
export interface ChordWish {
  /** "Em", "A7". */
  readonly symbol: string
  readonly degree: string
  /** Chromas from the root up: root, third, fifth, seventh. */
  readonly tones: readonly number[]
  /** Names of the tones, "F♯". */
  readonly names: readonly string[]
}

const MAJOR = [['I', 0], ['ii', 1], ['iii', 2], ['IV', 3], ['V', 4], ['vi', 5]] as const
const MINOR = [['i', 0], ['III', 2], ['iv', 3], ['v', 4], ['VI', 5], ['VII', 6]] as const

function wish(symbol: string, degree: string): ChordWish {
  const { notes } = Chord.get(symbol)
  return { symbol: shownNote(symbol), degree, tones: notes.map(chromaOfNote), names: notes.map(shownNote) }
}

/** The chords a tune in this key most often asks for (common practice): the triads on its degrees and the dominant seventh;
 * in minor the dominant of the raised leading note too. */
export function chordsOfKey(key: Key): readonly ChordWish[] {
  const tonic = plainNote(spell(60 + tonicOf(key), key.fifths))
  if (key.mode === 'major') {
    const { triads, chords } = TonalKey.majorKey(tonic)
    return [...MAJOR.map(([degree, index]) => wish(triads[index]!, degree)), wish(chords[4]!, 'V7')]
  }
  const { natural, harmonic } = TonalKey.minorKey(tonic)
  return [...MINOR.map(([degree, index]) => wish(natural.triads[index]!, degree)), wish(harmonic.triads[4]!, 'V'), wish(harmonic.chords[4]!, 'V7')]
}
