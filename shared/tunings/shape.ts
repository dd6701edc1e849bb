import { chromaOf, type Board } from './board'
import type { ChordWish } from './keyChords'
import { fretDistance } from './neck'
import { counted, listed } from './words'

/** One way of holding a chord. */
export interface Shape {
  /** String 1 first, from each string's own capo; 0 open, null not played. */
  readonly frets: readonly (number | null)[]
  /** Fretting fingers 1 to 4 by string; 0 where none is needed. */
  readonly fingers: readonly number[]
  /** One finger across several strings, at a fret counted from the nut. */
  readonly barre: { readonly fret: number, readonly fromString: number, readonly toString: number } | null
  /** Millimetres between the outermost fretted places. */
  readonly span: number
  /** 0: the root is lowest, 1 the third, 2 the fifth, 3 the seventh. */
  readonly inversion: number
  /** Tones that sound more than once, with how often. */
  readonly doubled: readonly { readonly name: string, readonly times: number }[]
  /** Tones left out. */
  readonly missing: readonly string[]
  readonly open: number
  /** Smaller is better (ours). */
  readonly cost: number
}

export const MOST_FINGERS = 4
/** Weights (ours): each fretted note, finger and string left out; a barre; another bass than the root; position and span. */
export const SHAPE_COST = { fretted: 1, finger: 0.8, muted: 1.5, mutedInside: 1.5, barre: 1, inversion: 2.5, missing: 1.5, position: 0.4, spanMm: 40, thin: 2 } as const

/** Millimetres between two frets counted from the nut. */
export const spanOf = (board: Board, from: number, to: number): number => board.scaleLength * (fretDistance(to) - fretDistance(from))

interface Held { readonly index: number, readonly fret: number }

/** Strings that a barre at the lowest fret can hold at once: no open string and nothing lower between its ends. */
function barreOf(held: readonly Held[], frets: readonly (number | null)[]): { fret: number, low: number, high: number } | null {
  const fret = Math.min(...held.map(each => each.fret))
  const at = held.filter(each => each.fret === fret).map(each => each.index)
  if (at.length < 2) return null
  const [low, high] = [Math.min(...at), Math.max(...at)]
  const between = frets.slice(low, high + 1)
  return between.every(each => each === null || each >= fret) ? { fret, low, high } : null
}

/** Fingers in order of fret, then from the thickest string; those under a barre share the first. */
function fingersOf(held: readonly Held[], barre: { fret: number, low: number, high: number } | null, strings: number): number[] {
  const fingers = Array.from({ length: strings }, () => 0)
  const isBarred = (each: Held) => barre !== null && each.fret === barre.fret
  held.filter(isBarred).forEach(each => (fingers[each.index] = 1))
  held.filter(each => !isBarred(each)).sort((a, b) => a.fret - b.fret || b.index - a.index)
    .forEach((each, order) => (fingers[each.index] = order + (barre ? 2 : 1)))
  return fingers
}

/**
 * Judges a placement.
 * @param placed frets from the nut, string 1 first; a string's own stop is open, null not played
 * @returns null where it is no shape of this chord: a tone is foreign or wanting, too few strings sound or five fingers are needed
 */
export function judge(board: Board, chord: ChordWish, placed: readonly (number | null)[]): Shape | null {
  const sounding = placed.flatMap((fret, index) => (fret === null ? [] : [{ index, fret, midi: board.opens[index]! + fret - board.stops[index]! }]))
  if (sounding.length < Math.min(4, placed.length)) return null
  const times = chord.tones.map(tone => sounding.filter(each => chromaOf(each.midi) === tone).length)
  if (times.reduce((sum, each) => sum + each, 0) < sounding.length) return null
  const missing = chord.tones.flatMap((_, index) => (times[index] ? [] : [index]))
  if (missing.some(index => index !== 2 || chord.tones.length < 4)) return null

  const held = sounding.filter(each => each.fret > board.stops[each.index]!)
  const barre = barreOf(held, placed)
  const needed = barre ? held.filter(each => each.fret > barre.fret).length + 1 : held.length
  if (needed > MOST_FINGERS) return null

  const places = held.map(each => each.fret)
  const span = held.length ? spanOf(board, Math.min(...places), Math.max(...places)) : 0
  const bass = sounding.reduce((low, each) => (each.midi < low.midi ? each : low))
  const inversion = chord.tones.indexOf(chromaOf(bass.midi))
  const indexes = sounding.map(each => each.index)
  const inside = placed.filter((fret, index) => fret === null && index > Math.min(...indexes) && index < Math.max(...indexes)).length
  const base = Math.min(...board.stops)
  const cost = SHAPE_COST.fretted * held.length + SHAPE_COST.finger * needed + (placed.length - sounding.length) * SHAPE_COST.muted + inside * SHAPE_COST.mutedInside
    + (barre ? SHAPE_COST.barre : 0) + (inversion ? SHAPE_COST.inversion : 0) + missing.length * SHAPE_COST.missing + span / SHAPE_COST.spanMm
    + (held.length ? SHAPE_COST.position * (Math.min(...places) - base) : 0) + (times[1] && times[1] > 2 ? SHAPE_COST.thin : 0)
  return {
    frets: placed.map((fret, index) => (fret === null ? null : fret - board.stops[index]!)), fingers: fingersOf(held, barre, placed.length),
    barre: barre && { fret: barre.fret, fromString: barre.high + 1, toString: barre.low + 1 }, span, inversion,
    doubled: chord.names.flatMap((name, index) => (times[index]! > 1 ? [{ name, times: times[index]! }] : [])),
    missing: missing.map(index => chord.names[index]!), open: sounding.length - held.length, cost,
  }
}

const BASS = ['root in the bass', 'first inversion', 'second inversion', 'third inversion']
const TIMES = ['', '', 'twice', 'three times', 'four times', 'five times', 'six times']

/** "Root in the bass; D twice, A twice; four strings open; 69 mm." */
export function shapeSentence(shape: Shape): string {
  const doubled = listed(shape.doubled.map(({ name, times }) => `${name} ${TIMES[times] ?? `${times} times`}`))
  const parts = [
    BASS[shape.inversion]!, doubled, shape.missing.length ? `without ${listed(shape.missing)}` : '',
    shape.open ? `${counted(shape.open, 'string')} open` : 'no string open',
    shape.span ? `${Math.round(shape.span)} mm between the outer fingers` : '',
  ].filter(Boolean).join('; ')
  return `${parts.slice(0, 1).toUpperCase()}${parts.slice(1)}.`
}
