import { ChordType, Interval } from 'tonal'

/** Kinds of chords as tonal lists them, as sets of half steps above the root (one bit each). */
export interface ChordKind {
  /** As tonal writes it: "M", "m7", "sus4". */
  readonly kind: string
  readonly tones: number
  /** Tones that a player may leave out and still call it so. */
  readonly optional: number
  /** How gladly a player reads it, smaller is better. */
  readonly rank: number
}

/** Kinds in the order in which a player would rather read them; what is not here comes after (ours). */
const PLAIN = ['M', 'm', '5', 'sus4', 'sus2', 'dim', 'aug', '7', 'm7', 'maj7', 'dim7', 'm7b5', '6', 'm6', '7sus4', 'Madd9', 'madd9', '9', 'm9', 'maj9', '6add9', '9sus4', 'm6add9']
export const RARE = 30

/** Chords of stacked thirds that tonal writes without their third or eleventh, and one it does not list (common practice). */
const STACKED: readonly { kind: string, intervals: readonly string[] }[] = [
  { kind: '11', intervals: ['1P', '3M', '5P', '7m', '9M', '11P'] },
  { kind: 'M11', intervals: ['1P', '3M', '5P', '7M', '9M', '11P'] },
  { kind: '13', intervals: ['1P', '3M', '5P', '7m', '9M', '11P', '13M'] },
  { kind: 'maj13', intervals: ['1P', '3M', '5P', '7M', '9M', '11P', '13M'] },
  { kind: 'mM11', intervals: ['1P', '3m', '5P', '7M', '9M', '11P'] },
]

/** Bits of intervals; a compound one stands for its simple one. */
const bitsOf = (intervals: readonly string[]): number =>
  intervals.reduce((bits, interval) => bits | (1 << ((Interval.semitones(interval) ?? 0) % 12)), 0)

/**
 * What may be left out (common practice of the fretboard): the perfect fifth of a chord of four tones or more; of an eleventh the ninth,
 * and the third of a major or dominant one; of a thirteenth the ninth and eleventh.
 */
function optionalOf(intervals: readonly string[]): number {
  if (intervals.length < 4) return 0
  const top = intervals.includes('13M') ? 13 : intervals.includes('11P') && intervals.some(each => each.startsWith('7')) ? 11 : 0
  return bitsOf([
    ...(intervals.includes('5P') ? ['5P'] : []),
    ...(top ? ['9M'] : []), ...(top === 13 ? ['11P'] : []), ...(top === 11 && intervals.includes('3M') ? ['3M'] : []),
  ])
}

const rankOf = (kind: string): number => {
  const index = PLAIN.indexOf(kind)
  return index < 0 ? RARE : index
}

const toKind = (kind: string, intervals: readonly string[]): ChordKind =>
  ({ kind, tones: bitsOf(intervals), optional: optionalOf(intervals), rank: rankOf(kind) })

/** Tonal's list, and what the stacked chords add to it; "no5" kinds are dropped, since any chord of four tones may lack its fifth. */
export const KINDS: readonly ChordKind[] = [
  ...ChordType.all().filter(type => !type.aliases[0]!.includes('no5')).map(type => toKind(type.aliases[0]!, type.intervals)),
  ...STACKED.map(({ kind, intervals }) => toKind(kind, intervals)),
]
