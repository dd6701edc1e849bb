import { ChordType } from 'tonal'
import type { Key } from '../score/types'
import { chromaOf, tonicOf } from './board'
import { KINDS } from './kinds'
import { shownNote } from './notes'

export interface ChordName {
  /** "Dsus4", "G/B". */
  readonly symbol: string
  /** "D suspended fourth"; the symbol where tonal has no name for the kind. */
  readonly spoken: string
  /** Chroma of the root and of the lowest sound. */
  readonly root: number
  readonly bass: number
  /** Kind as tonal writes it: "M", "m", "sus4", "7". */
  readonly kind: string
  /** Other names that fit, the better first. */
  readonly others: readonly (Reading & { readonly symbol: string })[]
}

/** A name without its letters: where root and bass lie, and the kind of chord. */
export interface Reading { readonly root: number, readonly kind: string, readonly bass: number }

/** Weights of a reading (ours): a bass that is not the root, a bass foreign to the chord, and a tone left out count against it,
 * so that the bass decides between plain names and a plain name over another bass comes before a rare one. */
const COST = { inversion: 25, foreignBass: 28, wanting: 16 } as const

const rotate = (bits: number, halfSteps: number): number => ((bits << halfSteps) | (bits >> (12 - halfSteps))) & 0xFFF
const countOf = (bits: number): number => bits.toString(2).replaceAll('0', '').length

/** Chords of exactly these chromas rooted on one of them, some tones perhaps left out, with their costs. */
function rootedOn(bits: number, root: number): (Omit<Reading, 'bass'> & { cost: number })[] {
  const own = rotate(bits, (12 - root) % 12)
  return KINDS.flatMap(({ kind, tones, optional, rank }) => {
    const wanting = tones & ~own
    return own & ~tones || wanting & ~optional ? [] : [{ root, kind, cost: rank + (wanting ? COST.wanting + countOf(wanting) : 0) }]
  })
}

/** Readings of what sounds over C, by its set of chromas: 2048 at most, since the bass always sounds. */
const overC = new Map<number, readonly Reading[]>()

function readingsOverC(bits: number): readonly Reading[] {
  const known = overC.get(bits)
  if (known) return known
  const chromas = Array.from({ length: 12 }, (_, chroma) => chroma).filter(chroma => bits & (1 << chroma))
  const upper = bits & ~1
  const all = [
    ...chromas.flatMap(root => rootedOn(bits, root).map(each => ({ ...each, cost: each.cost + (root ? COST.inversion : 0) }))),
    ...chromas.filter(chroma => chroma > 0).flatMap(root => rootedOn(upper, root).filter(each => each.cost < COST.wanting)
      .map(each => ({ ...each, cost: each.cost + COST.foreignBass }))),
  ]
  const readings = all.sort((a, b) => a.cost - b.cost).map(({ root, kind }) => ({ root, kind, bass: 0 }))
  overC.set(bits, readings)
  return readings
}

const ROMAN = ['I', '♭II', 'II', '♭III', 'III', 'IV', '♯IV', 'V', '♭VI', 'VI', '♭VII', 'VII']
/** Places of those degrees on the line of fifths from the tonic. */
const DEGREE_FIFTHS = [0, -5, 2, -3, 4, -1, 6, 1, -4, 3, -2, 5]

/** Place on the line of fifths of a note as a degree above another. */
const placeAbove = (place: number, halfSteps: number): number => place + DEGREE_FIFTHS[chromaOf(halfSteps)]!

/** The note at a place; from B♯ or C♭ on its plainer neighbour. */
function noteAt(place: number): string {
  const kept = place > 10 ? place - 12 : place < -6 ? place + 12 : place
  const alter = Math.floor((kept + 1) / 7)
  return shownNote('FCGDAEB'[kept + 1 - 7 * alter]! + (alter < 0 ? 'b'.repeat(-alter) : '#'.repeat(alter)))
}

/** A note as its degree of the key: "F♯". */
export const noteInKey = (chroma: number, key: Key): string =>
  noteAt(placeAbove(key.fifths + (key.mode === 'minor' ? 3 : 0), chroma - tonicOf(key)))

/** Root as a degree of the key, bass as a degree above the root: "C♯", "G♯". */
function lettersOf({ root, bass }: Reading, key: Key): { root: string, bass: string } {
  const place = placeAbove(key.fifths + (key.mode === 'minor' ? 3 : 0), root - tonicOf(key))
  return { root: noteAt(place), bass: noteAt(placeAbove(place > 10 ? place - 12 : place < -6 ? place + 12 : place, bass - root)) }
}

/** A major triad needs no sign, and seventh chords of the major kind are written out. */
const kindText = (kind: string): string =>
  kind.replace(/^M(?=\d)/, 'maj').replace(/^M/, '').replace('/ma7', '(maj7)').replaceAll('#', '♯').replaceAll(/b(?=\d)/g, '♭')

/**
 * Names what sounds together. Several names may fit (C E G A is C6 or Am7/C): the lowest sound decides, so that a name with the bass as
 * its root comes before one over another bass; among equals the plainer kind. All that sounds must belong to the chord (or be its bass);
 * tones that players leave out may be wanting. A plain name over another bass comes before a rare one.
 * @param midis sounding pitches in any order
 * @param key in which the notes are spelled
 * @returns null for fewer than two different notes, or where no chord of tonal's list has them
 */
export function nameChord(midis: readonly number[], key: Key): ChordName | null {
  const bass = chromaOf(Math.min(...midis))
  const bits = midis.reduce((set, midi) => set | (1 << chromaOf(midi - bass)), 0)
  const [chosen, ...others] = readingsOverC(bits).map(each => ({ root: (each.root + bass) % 12, kind: each.kind, bass }))
  if (!chosen) return null
  const symbolOf = (each: Reading) => {
    const letters = lettersOf(each, key)
    return `${letters.root}${kindText(each.kind)}${each.root === bass ? '' : `/${letters.bass}`}`
  }
  const letters = lettersOf(chosen, key)
  const kind = ChordType.get(chosen.kind).name
  const spoken = kind ? `${letters.root} ${kind}${chosen.root === bass ? '' : ` over ${letters.bass}`}` : symbolOf(chosen)
  return { ...chosen, symbol: symbolOf(chosen), spoken, others: others.map(each => ({ ...each, symbol: symbolOf(each) })) }
}

const isMinorKind = (kind: string): boolean => /^(m(?!aj)|dim|o)/.test(kind)

/** The chord as a degree of the key: "IVsus4", "ii", "V7/♭VII" over a bass of its own. */
export function degreeOf({ root, bass, kind }: Reading, tonic: number): string {
  const roman = (chroma: number) => ROMAN[chromaOf(chroma - tonic)]!
  const own = isMinorKind(kind) ? roman(root).toLowerCase() : roman(root)
  const rest = kindText(isMinorKind(kind) ? kind.replace(/^m(?!aj)/, '') : kind)
  return `${own}${rest}${bass === root ? '' : `/${roman(bass)}`}`
}
