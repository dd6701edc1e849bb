import { capoOffset } from '../score/sounding'
import type { Key } from '../score/types'
import { boardOf, chromaOf, keyOf, movedKey, tonicOf, type Neck } from './board'
import { degreeOf, nameChord, type ChordName } from './chords'
import { spellTogether } from './spelling'
import { stringsWord } from './words'

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

/** Barres that matter most, on the degrees of a major scale (common practice), where there is no room for all. */
export const MAIN_BARRES: readonly number[] = [0, 2, 4, 5, 7, 9, 12]

/** "Capo at fret 2. Frets count from it, chords as they sound."; '' without a capo. A partial capo leaves other strings open from the nut
 * or the full capo, so that barres count from there. */
export function capoSentence(neck: Neck): string {
  if (neck.capos.length === 0) return ''
  const isPartial = (covered: readonly number[] | undefined): covered is readonly number[] => covered !== undefined && covered.length < neck.strings.length
  const named = neck.capos.map(({ fret, strings }) => (isPartial(strings) ? `Partial capo at fret ${fret} on ${stringsWord(strings)}.` : `Capo at fret ${fret}.`))
  const from = capoOffset(neck) === 0 ? 'the nut' : neck.capos.length === 1 ? 'it' : 'the full capo'
  return `${named.join(' ')} Frets count from ${from}, chords as they sound.`
}
