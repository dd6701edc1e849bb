import { capoFret } from '../score/sounding'
import type { Head } from '../score/types'
import { fretDistance } from '../tunings/neck'

/** Millimetres, not frets: four frets at the nut are twice as wide as four at the octave. */
type Board = Pick<Head, 'capos' | 'strings' | 'instrument'>

/** Millimetres from the nut to a fret wire, 0 at the nut: L·(1 − 2^(−n/12)). */
export const fretMm = (scaleLength: number, fret: number): number => scaleLength * fretDistance(fret)

/** Millimetres from a fret wire to the saddle: what is left of the string to sound. */
export const soundingLengthMm = (scaleLength: number, fret: number): number => scaleLength - fretMm(scaleLength, fret)

/** Millimetres between two fret wires, both counted from the nut. */
export const spanMm = (scaleLength: number, from: number, to: number): number =>
  Math.abs(fretMm(scaleLength, to) - fretMm(scaleLength, from))

/** Millimetres between two places of a neck, their frets counted from the capo of their own string as notes are written.
 * An open string needs no finger: null. */
export function spanBetween(board: Board, a: { string: number, fret: number }, b: { string: number, fret: number }): number | null {
  if (a.fret === 0 || b.fret === 0) return null
  return spanMm(board.instrument.scaleLength, capoFret(board, a.string) + a.fret, capoFret(board, b.string) + b.fret)
}

/** How far a hand opens, in millimetres; another hand has other limits (ours, adjustable). */
export interface Reach { readonly comfortable: number, readonly stretch: number, readonly hard: number }
export const REACH: Reach = { comfortable: 100, stretch: 115, hard: 125 }

export type SpanWord = 'comfortable' | 'stretch' | 'hard' | 'beyond reach'

/** A limit belongs to the easier side: 100 mm is comfortable. */
export function spanWord(mm: number, reach: Reach = REACH): SpanWord {
  if (mm <= reach.comfortable) return 'comfortable'
  if (mm <= reach.stretch) return 'stretch'
  return mm <= reach.hard ? 'hard' : 'beyond reach'
}
