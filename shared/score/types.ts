import type { Fraction } from './fraction'

/** An arrangement is one immutable value. Ids are made by the client and never reused; edits address ids only. */
export interface Score {
  readonly head: Head
  readonly bars: readonly Bar[]
}

export interface Head {
  readonly title: string
  readonly composer: string
  readonly arranger: string
  readonly rights: string
  /** Where the tune was taken from, as cited in print. */
  readonly source: string
  /** What a note does that says nothing of its own: end as written, or ring on. */
  readonly ring: RingRule
  readonly instrument: Instrument
  /** String 1 first, as players count; never sorted by pitch. 4 to 10. */
  readonly strings: readonly OpenString[]
  /** A full and a partial capo may be on together. */
  readonly capos: readonly Capo[]
}

export type RingRule = 'written' | 'let-ring'

export interface Instrument {
  /** Millimetres from nut to saddle, 300 to 1000. */
  readonly scaleLength: number
  /** Frets on the neck, 5 to 36. */
  readonly frets: number
}

export interface OpenString {
  /** Sounding open pitch without capo, as text: "D2", "F#3". */
  readonly pitch: string
  /** The fret at which a short string starts (a banjo's fifth string); absent: the nut. */
  readonly from?: number
}

export interface Capo {
  readonly fret: number
  /** Strings it covers, counted as players count; absent: all. */
  readonly strings?: readonly number[]
}

export interface Bar {
  readonly id: string
  /** Absent means inherited from the bar before; `contextOf` resolves them. */
  readonly meter?: Meter
  readonly key?: Key
  readonly tempo?: Tempo
  /** What the bar is meant to hold where it is not the meter: a pickup, a short closing bar. */
  readonly length?: Fraction
  readonly repeatStart?: true
  /** How often the passage is played in all, 2 or more. */
  readonly repeatEnd?: number
  /** This bar's own default for its notes. */
  readonly ring?: RingRule
  readonly voices: Voices
}

/** The melody's voice is `upper` (stems up), the thumb's is `lower`; `middle` has its stems by position. */
export type VoiceName = 'upper' | 'lower' | 'middle'
export const VOICE_NAMES: readonly VoiceName[] = ['upper', 'lower', 'middle']
export type Voices = { readonly [name in VoiceName]?: Voice }

export interface Voice {
  readonly events: readonly ScoreEvent[]
  readonly tuplets?: readonly Tuplet[]
}

export interface Tuplet {
  readonly id: string
  /** `actual` in the time of `normal`: a triplet is 3 in the time of 2. */
  readonly actual: number
  readonly normal: number
  readonly base: Base
}

/** 1 whole, 2 half, 4 quarter … 64. */
export type Base = 1 | 2 | 4 | 8 | 16 | 32 | 64
export const BASES: readonly Base[] = [1, 2, 4, 8, 16, 32, 64]

export interface Length {
  readonly base: Base
  /** 0 to 3. */
  readonly dots: number
  /** Ids of the voice's tuplets this event stands in, outermost first. */
  readonly tuplets?: readonly string[]
}

export interface ScoreEvent {
  readonly id: string
  readonly length: Length
  /** None: a rest. At most one to a string. */
  readonly notes: readonly Note[]
  /** A gap: a rest that is not drawn. */
  readonly hidden?: true
}

export interface Note {
  readonly id: string
  /** Counted as players count, 1 = the highest-standing string of the diagram. */
  readonly string: number
  /** Counted from the string's capo. For a harmonic: the touched place, which need not be whole (3.2). */
  readonly fret: number
  readonly harmonic?: Harmonic
  readonly dead?: true
  /** Overrides the ring rule of bar and head for this note. */
  readonly ring?: RingRule
  /** To the next note of this string and voice; shown as incomplete until it is there. */
  readonly link?: LinkKind
  /** Staff letter chosen by hand where the key's own is not wanted. */
  readonly spelling?: Respelling
}

/** A natural harmonic sounds the string's `partial`-th mode, 2 to 12; the touched place is the note's fret. */
export interface Harmonic { readonly partial: number }
export type LinkKind = 'tie' | 'hammer-on' | 'pull-off'
export interface Respelling { readonly step: 'C' | 'D' | 'E' | 'F' | 'G' | 'A' | 'B', readonly alter: number }

export interface Meter { readonly beats: number, readonly unit: Base }
/** −7 (seven flats) to 7 (seven sharps). */
export interface Key { readonly fifths: number, readonly mode: 'major' | 'minor' }
/** `perMinute` notes of this length a minute, 10 to 400. */
export interface Tempo { readonly base: Base, readonly dots: number, readonly perMinute: number }
