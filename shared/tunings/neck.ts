import { noteName, spell } from '../score/pitch'
import { capoFret, openMidi, type Strung } from '../score/sounding'
import type { Head } from '../score/types'

/** Distance of a fret from the nut as a part of the scale length: 1 − 2^(−fret/12), twelve equal steps to the octave. */
export const fretDistance = (fret: number): number => 1 - 2 ** (-fret / 12)

/** Where a finger goes for a fret: half-way between it and the wire before, as a part of the scale length; 0 at the nut. */
export const fingerDistance = (fret: number): number => (fret <= 0 ? 0 : (fretDistance(fret) + fretDistance(fret - 1)) / 2)

/** A place on the neck with the note that sounds there. */
export interface NeckPlace {
  readonly string: number
  /** From the nut. */
  readonly fret: number
  /** "F♯" */
  readonly name: string
}

/** Half steps above the tonic of a major key; its relative minor has the same notes. */
const MAJOR: readonly number[] = [0, 2, 4, 5, 7, 9, 11]

/** Name of the note that sounds at a fret counted from the nut, spelled in the sounding key. */
export const nameAt = (head: Strung, string: number, fret: number, fifths: number): string =>
  noteName(spell(openMidi(head, string) + fret - capoFret(head, string), fifths))

/** Every fretted place above the capo, up to the last fret, at which a note of the key sounds.
 * @param fifths the sounding key's signature, −7 to 7 */
export function scalePlaces(head: Pick<Head, 'strings' | 'capos' | 'instrument'>, fifths: number): readonly NeckPlace[] {
  const chromas = new Set(MAJOR.map(step => (((step + 7 * fifths) % 12) + 12) % 12))
  return head.strings.flatMap((_, index) => {
    const string = index + 1
    const nut = capoFret(head, string)
    return Array.from({ length: head.instrument.frets - nut }, (_each, step) => nut + 1 + step)
      .filter(fret => chromas.has((openMidi(head, string) + fret - nut) % 12))
      .map(fret => ({ string, fret, name: nameAt(head, string, fret, fifths) }))
  })
}
