import { midiOfText, pitchLabel, spell, type Spelling } from './pitch'
import type { Head, Key, Note } from './types'

/** Law 1, in one place: sounding pitch = the string's open pitch + the capo that covers it + fret. */

/** What decides the pitch of a string: the strings and the capos on them. */
export type Strung = Pick<Head, 'strings' | 'capos'>

/** The fret, counted from the nut, at which the capo (or the start of a short string) stops this string; 0: none. */
export function capoFret(head: Strung, string: number): number {
  const covering = head.capos.filter(capo => !capo.strings || capo.strings.includes(string)).map(capo => capo.fret)
  return Math.max(0, head.strings[string - 1]?.from ?? 0, ...covering)
}

/** Fret counted from the nut; a harmonic's touched place likewise. */
export const fretFromNut = (head: Head, note: Pick<Note, 'string' | 'fret'>): number => capoFret(head, note.string) + note.fret

/** Sounding pitch of the string plucked open, capo on. A short string's stored pitch is already the one it starts at.
 * @throws RangeError when there is no such string. */
export function openMidi(head: Strung, string: number): number {
  const open = head.strings[string - 1]
  if (!open) throw new RangeError(`no string ${string}`)
  return midiOfText(open.pitch) + capoFret(head, string) - (open.from ?? 0)
}

/** Half steps by which the written staff lies below the sound because of the capo: the largest full capo. */
export const capoOffset = (head: Strung): number =>
  Math.max(0, ...head.capos.filter(capo => !capo.strings || capo.strings.length === head.strings.length).map(capo => capo.fret))

/** The key heard when a piece written in `key` is played `halfSteps` higher; of two spellings the one with fewer signs, six sharps before six flats. */
export function raisedKey(key: Key, halfSteps: number): Key {
  const fifths = ((key.fifths + 7 * halfSteps + 5) % 12 + 12) % 12 - 5
  return halfSteps % 12 === 0 ? key : { ...key, fifths }
}

/** Sounding pitch (MIDI number; for partials off the half step with decimals). */
export function soundingMidi(head: Head, note: Pick<Note, 'string' | 'fret' | 'harmonic'>): number {
  const open = openMidi(head, note.string)
  return note.harmonic ? open + 12 * Math.log2(note.harmonic.partial) : open + note.fret
}

/** Staff pitch before the octave sign of the clef: as if there were no full capo, still at sounding octave. */
export const staffMidi = (head: Head, note: Pick<Note, 'string' | 'fret' | 'harmonic'>): number =>
  Math.round(soundingMidi(head, note)) - capoOffset(head)

/** The spelled staff pitch (sounding octave; the clef's 8 lowers the drawing). A respelling by hand holds if it fits the sound. */
export function staffSpelling(head: Head, note: Pick<Note, 'string' | 'fret' | 'harmonic' | 'spelling'>, fifths: number): Spelling {
  const midi = staffMidi(head, note)
  if (!note.spelling) return spell(midi, fifths)
  const { step, alter } = note.spelling
  const natural = midiOfText(`${step}4`)
  const octave = 4 + (midi - alter - natural) / 12
  return Number.isInteger(octave) ? { step, alter, octave } : spell(midi, fifths)
}

/** Sounding pitch as read by people, spelled in a sounding key: "B3". */
export const soundingLabel = (head: Head, note: Pick<Note, 'string' | 'fret' | 'harmonic'>, fifths: number): string =>
  pitchLabel(spell(Math.round(soundingMidi(head, note)), fifths))

/** The fret is counted from the capo; the neck ends where the instrument says. */
export const isFretOnNeck = (head: Head, string: number, fret: number): boolean =>
  fret >= 0 && capoFret(head, string) + fret <= head.instrument.frets

/** Partials that sound when a string is touched over a fret (common practice; nodes at 12·log₂(p/(p−k)) half steps). */
export const PARTIAL_AT_FRET: Readonly<Record<number, number>> = { 12: 2, 7: 3, 19: 3, 5: 4, 24: 4, 4: 5, 9: 5, 16: 5, 3: 6 }
