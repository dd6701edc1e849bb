/**
 * Pitches. A spelled pitch is written as players write it, step, accidentals and octave: "D2", "F#3", "Bb3"
 * (scientific pitch notation, C4 = middle C). A sounding pitch is a MIDI number (C4 = 60, A4 = 69 = 440 Hz,
 * ISO 16:1975), with decimals where a harmonic does not fall on a half step.
 */
export type Step = 'C' | 'D' | 'E' | 'F' | 'G' | 'A' | 'B'
export interface Spelling { readonly step: Step, readonly alter: number, readonly octave: number }

export const STEPS: readonly Step[] = ['C', 'D', 'E', 'F', 'G', 'A', 'B']
const STEP_SEMITONES: Record<Step, number> = { C: 0, D: 2, E: 4, F: 5, G: 7, A: 9, B: 11 }

/** Reads "C#4", "Bb3", "f♯2"; null where the text is no pitch. Octaves −1 to 9. */
export function parsePitch(text: string): Spelling | null {
  const match = /^([A-Ga-g])(##|♯♯|bb|♭♭|[#♯b♭]?)(-1|\d)$/.exec(text.trim())
  if (!match) return null
  const accidental = match[2]!.replaceAll('♯', '#').replaceAll('♭', 'b')
  const alter = accidental.startsWith('b') ? -accidental.length : accidental.length
  return { step: match[1]!.toUpperCase() as Step, alter, octave: Number(match[3]) }
}

export const midiOf = (pitch: Spelling): number => 12 * (pitch.octave + 1) + STEP_SEMITONES[pitch.step] + pitch.alter

/** Sounding pitch of a text known to be valid (a stored open string).
 * @throws RangeError when it is no pitch. */
export function midiOfText(text: string): number {
  const pitch = parsePitch(text)
  if (!pitch) throw new RangeError(`no pitch: ${text}`)
  return midiOf(pitch)
}

const ACCIDENTALS: Record<number, string> = { [-2]: 'bb', [-1]: 'b', 0: '', 1: '#', 2: '##' }

/** "F#3", as stored. */
export const pitchText = (pitch: Spelling): string => `${pitch.step}${ACCIDENTALS[pitch.alter] ?? ''}${pitch.octave}`

/** Letter and accidental as read by people: "F♯". */
export const noteName = (pitch: Pick<Spelling, 'step' | 'alter'>): string =>
  pitch.step + (ACCIDENTALS[pitch.alter] ?? '').replaceAll('#', '♯').replaceAll('b', '♭')

/** Pitch as read by people: "F♯3". */
export const pitchLabel = (pitch: Spelling): string => `${noteName(pitch)}${pitch.octave}`

/** Frequency in hertz of a sounding pitch; `a4` in hertz. */
export const frequencyOf = (midi: number, a4 = 440): number => a4 * 2 ** ((midi - 69) / 12)

/** Position on the line of fifths of a step with its alteration: F −1, C 0, G 1 … F♯ 6. */
const FIFTHS: Record<Step, number> = { F: -1, C: 0, G: 1, D: 2, A: 3, E: 4, B: 5 }
export const fifthsOf = (pitch: Pick<Spelling, 'step' | 'alter'>): number => FIFTHS[pitch.step] + 7 * pitch.alter

const STEP_BY_FIFTHS: readonly Step[] = ['F', 'C', 'G', 'D', 'A', 'E', 'B']

/**
 * Spells a sounding pitch in a key. Twelve neighbours on the line of fifths serve: the seven scale notes as the key
 * writes them, two below (in C: B♭ E♭) and three above (F♯ C♯ G♯), which makes the raised seventh of the minor a sharp.
 * @param midi a whole sounding pitch
 * @param fifths the key signature, −7 to 7
 */
export function spell(midi: number, fifths: number): Spelling {
  const whole = Math.round(midi)
  const low = fifths - 3
  const chroma = ((whole % 12) + 12) % 12
  // Chroma on the line of fifths: position p sounds 7p mod 12, hence p ≡ 7·chroma (mod 12).
  const residue = ((chroma * 7 - low) % 12 + 12) % 12
  const position = low + residue
  const alter = Math.floor((position + 1) / 7)
  const step = STEP_BY_FIFTHS[position + 1 - 7 * alter]!
  const octave = Math.round((whole - STEP_SEMITONES[step] - alter) / 12) - 1
  return { step, alter, octave }
}
