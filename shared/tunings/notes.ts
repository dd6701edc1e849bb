import { midiOfText, pitchText, type Spelling } from '../score/pitch'

/** Note names without octave, as the theory library writes them ("F#", "Bb", "Fbb") and as people read them ("F♯", "B♭"). */

/** "F#" of a spelled pitch. */
export const plainNote = (pitch: Spelling): string => pitchText({ ...pitch, octave: 4 }).slice(0, -1)

/** "F♯" */
export const shownNote = (note: string): string => note.slice(0, 1) + note.slice(1).replaceAll('#', '♯').replaceAll('b', '♭')

/** 0 to 11 above C. @throws RangeError when it is no note */
export function chromaOfNote(note: string): number {
  const accidentals = [...note.slice(1)].reduce((sum, sign) => sum + (sign === '#' ? 1 : -1), 0)
  return (((midiOfText(`${note.slice(0, 1)}4`) + accidentals) % 12) + 12) % 12
}
