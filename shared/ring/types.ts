import type { Fraction } from '../score/fraction'
import type { VoiceName } from '../score/types'

/**
 * What ends a note: its written length, its string being used again, a damp mark (a note that ends as written where its bar lets
 * ring), its own dying away, or the end of the piece (nothing stops it there: it dies away in the silence after the last bar).
 */
export type RingEnd = 'written' | 'string' | 'damp' | 'dies' | 'end'

/** How long one plucked, hammered or pulled note sounds. A tie goes on with the note; it does not begin another. */
export interface Ring {
  readonly noteId: string
  readonly eventId: string
  readonly string: number
  readonly voice: VoiceName
  /** Whole notes from its bar line. */
  readonly start: Fraction
  /** Whole notes; may reach over bar lines. Zero: the string is stopped nearer the bridge at that moment, so the note is not heard. */
  readonly sounds: Fraction
  readonly ends: RingEnd
  /** An open string or a harmonic: no finger holds it. */
  readonly open: boolean
}

/** The part of a ring that lies in one bar, in whole notes from its bar line. */
export interface Lane {
  readonly noteId: string
  readonly string: number
  readonly from: Fraction
  readonly to: Fraction
  readonly open: boolean
  /** The note is struck in this bar. */
  readonly starts: boolean
  /** The ring ends in this bar, at `to`. */
  readonly ends: boolean
}
