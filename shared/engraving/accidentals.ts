import { fifthsOf, type Spelling, type Step } from '../score/pitch'

/** Alteration that the key signature gives a step. */
export function alterInKey(step: Step, fifths: number): number {
  const order = fifthsOf({ step, alter: 0 }) + 1
  if (order < fifths) return 1
  return 6 - order < -fifths ? -1 : 0
}

export interface Spelled extends Spelling {
  /** Tied from the bar before: its accidental still holds for it and is not repeated, and says nothing to later notes. */
  readonly tied: boolean
}

/**
 * The accidental to print before each note of a bar, in time order; null: none. An accidental holds for its line or space
 * until the bar line (Gould, Behind Bars, "Accidentals"), in every voice of the staff.
 */
export function accidentalsOf(notes: readonly Spelled[], fifths: number): readonly (number | null)[] {
  const standing = new Map<string, number>()
  return notes.map(({ step, octave, alter, tied }) => {
    const place = `${step}${octave}`
    if (tied || (standing.get(place) ?? alterInKey(step, fifths)) === alter) return null
    standing.set(place, alter)
    return alter
  })
}
