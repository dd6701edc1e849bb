import type { Fraction } from '../score/fraction'
import type { Step } from '../score/pitch'
import type { Base, VoiceName } from '../score/types'
import type { Link } from './links'

export type Stem = 1 | -1

export interface StaffNote {
  readonly noteId: string
  readonly string: number
  readonly step: Step
  /** As written: an octave above the sound. */
  readonly octave: number
  /** 0 is the staff's bottom line, each step up one more. */
  readonly position: number
  /** Alteration to print before the head; null: none. */
  readonly accidental: number | null
  readonly head: 'normal' | 'diamond' | 'cross'
  /** An open tie behind the head: the string rings on, against the default of its bar. */
  readonly letRing: boolean
}

export interface StaffEvent {
  readonly eventId: string
  readonly voice: VoiceName
  readonly start: Fraction
  readonly duration: Fraction
  readonly base: Base
  readonly dots: number
  /** Index of its column in the bar's slices. */
  readonly slice: number
  /** Low to high; none: a rest. */
  readonly notes: readonly StaffNote[]
  /** A gap, or a rest that would stand on an equal rest. */
  readonly hidden: boolean
  readonly stem: Stem
  /** Where a rest stands; 4 is the middle line. */
  readonly restPosition: number
}

export interface EngravedBeam { readonly eventIds: readonly string[], readonly breaks: readonly number[] }

export interface EngravedTuplet {
  readonly eventIds: readonly string[]
  readonly actual: number
  readonly normal: number
  /** Without a bracket the number stands at the beam. */
  readonly bracket: boolean
  readonly above: boolean
}

export interface TabMark {
  readonly noteId: string
  readonly eventId: string
  readonly voice: VoiceName
  readonly string: number
  readonly slice: number
  readonly text: string
  /** Second number on the same string at the same moment: it stands beside the first. */
  readonly beside: boolean
}

/** A moment at which something starts. */
export interface Slice {
  readonly at: Fraction
  /** Points that the column needs left of its head's left edge. */
  readonly left: number
  /** Points that it needs right of its head's left edge. */
  readonly right: number
  /** Points to the next column that its duration asks for. */
  readonly ideal: number
}

/** How much a voice is over (positive) or under what the bar is meant to hold, in whole notes. */
export interface Surplus { readonly voice: VoiceName, readonly amount: Fraction }

/** All that a bar shows, in no particular width. Pure data, one object for one bar in one context. */
export interface BarNotation {
  readonly events: readonly StaffEvent[]
  readonly beams: readonly EngravedBeam[]
  readonly tuplets: readonly EngravedTuplet[]
  readonly tab: readonly TabMark[]
  readonly links: readonly Link[]
  readonly slices: readonly Slice[]
  readonly surplus: readonly Surplus[]
  /** More than one voice sounds: stems, ties and rests keep apart. */
  readonly isPolyphonic: boolean
  /** Time the bar takes: what it is meant to hold, or its longest voice where that is more. */
  readonly total: Fraction
  /** Time that no voice fills yet; null when some voice does. */
  readonly missing: Fraction | null
  /** Highest and lowest y reached on the staff; its top line is 0. */
  readonly top: number
  readonly bottom: number
  /** Points between bar lines, without what a clef, key or meter takes: as wished, and at the least. */
  readonly body: number
  readonly least: number
}
