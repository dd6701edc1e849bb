import { capoOffset } from '../score/sounding'
import type { Key } from '../score/types'
import { boardOf, chromaOf, keyOf, movedKey, tonicOf, type Neck } from './board'
import { degreeOf, nameChord, type ChordName } from './chords'
import { spellTogether } from './spelling'

export interface Barre {
  /** Counted from the full capo, as notes are written; 0: the open strings. */
  readonly fret: number
  readonly midis: readonly number[]
  /** As it sounds. */
  readonly sound: ChordName | null
  /** As chord symbols are written, as if there were no capo; equal to the sound without one. */
  readonly written: ChordName | null
  readonly degree: string | null
}

/**
 * What the open strings and every straight barre sound. A string held by a partial capo above the barre sounds from its capo.
 * @param key as written, without the capo
 * @param last highest barre
 */
export function straightBarres(neck: Neck, key: Key, last = 12): readonly Barre[] {
  const { opens, stops, lastFret } = boardOf(neck)
  const offset = capoOffset(neck)
  const sounding = movedKey(key, offset)
  const frets = Array.from({ length: Math.min(last, lastFret - offset) + 1 }, (_, fret) => fret)
  return frets.map((fret) => {
    const midis = opens.map((open, index) => open + Math.max(0, offset + fret - stops[index]!))
    const sound = nameChord(midis, sounding)
    return { fret, midis, sound, written: nameChord(midis.map(midi => midi - offset), key), degree: sound && degreeOf(sound, tonicOf(sounding)) }
  })
}

/** The key in which a tuning is at home, capo off: the open chord's root, minor where the third above it is; else the lowest string's. */
export function homeKey(neck: Neck): Key {
  const { opens } = boardOf({ ...neck, capos: [] })
  const tonic = nameChord(opens, { fifths: 0, mode: 'major' })?.root ?? chromaOf(Math.min(...opens))
  const has = (halfSteps: number) => opens.some(midi => chromaOf(midi - tonic) === halfSteps)
  const key = keyOf(tonic, has(3) && !has(4) ? 'minor' : 'major')
  const isFlat = spellTogether(opens).some(pitch => pitch.alter < 0)
  return key.fifths === 6 && isFlat ? { ...key, fifths: -6 } : key
}
