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
/** Weights (ours): each fretted note, finger and string left out; a barre; another bass than the root; position and span;
 * a third sounding three times. */
export const SHAPE_COST = { fretted: 1, finger: 0.8, muted: 1.9, mutedInside: 1.5, barre: 1, inversion: 3, missing: 1.5, position: 0.4, spanMm: 40, thickThird: 2 } as const

/** Millimetres between two frets counted from the nut. */
export const spanOf = (board: Board, from: number, to: number): number => board.scaleLength * (fretDistance(to) - fretDistance(from))

/** What one pass over a placement finds; the search makes thousands, so that it allocates little. */
interface Survey {
  readonly times: readonly number[]
  readonly sounding: number
  readonly inside: number
  readonly bass: number
  readonly held: number
  readonly lowest: number
  readonly highest: number
  /** A barre's thickest and thinnest string as indexes, where one finger holds all at the lowest fret. */
  readonly barre: readonly [low: number, high: number] | null
  readonly fingers: number
}

/** Null where a tone is foreign to the chord. */
function survey(board: Board, tones: readonly number[], placed: readonly (number | null)[]): Survey | null {
  const times = tones.map(() => 0)
  let [sounding, bass, held, first, last] = [0, Infinity, 0, -1, -1]
  let [lowest, highest, atLowest, low, high] = [Infinity, 0, 0, -1, -1]
  for (let index = 0; index < placed.length; index += 1) {
    const fret = placed[index]!
    if (fret === null) continue
    const midi = board.opens[index]! + fret - board.stops[index]!
    const tone = tones.indexOf(chromaOf(midi))
    if (tone < 0) return null
    times[tone]! += 1
    sounding += 1
    if (first < 0) first = index
    last = index
    if (midi < bass) bass = midi
    if (fret <= board.stops[index]!) continue
    held += 1
    if (fret > highest) highest = fret
    if (fret < lowest) [lowest, atLowest, low] = [fret, 0, index]
    if (fret === lowest) [atLowest, high] = [atLowest + 1, index]
  }
  // Two strings take a finger each while there are fingers enough.
  const isBarre = (atLowest > 2 || (atLowest > 1 && held > MOST_FINGERS)) && isClear(placed, low, high, lowest)
  return {
    times, sounding, inside: last - first + 1 - sounding, bass, held, lowest, highest,
    barre: isBarre ? [low, high] : null, fingers: isBarre ? held - atLowest + 1 : held,
  }
}

/** No open string, nor anything lower, between a barre's ends. */
function isClear(placed: readonly (number | null)[], low: number, high: number, fret: number): boolean {
  for (let index = low; index <= high; index += 1) {
    const each = placed[index]!
    if (each !== null && each < fret) return false
  }
  return true
}

/** Fingers in order of fret, then from the thickest string; those under a barre share the first. */
function fingersOf(board: Board, placed: readonly (number | null)[], { barre, lowest }: Survey): number[] {
  const held = placed.flatMap((fret, index) => (fret !== null && fret > board.stops[index]! ? [{ index, fret }] : []))
  const isBarred = ({ fret }: { fret: number }) => barre !== null && fret === lowest
  const order = held.filter(each => !isBarred(each)).sort((a, b) => a.fret - b.fret || b.index - a.index).map(each => each.index)
  return placed.map((fret, index) => {
    const at = order.indexOf(index)
    return at >= 0 ? at + (barre ? 2 : 1) : fret !== null && fret > board.stops[index]! ? 1 : 0
  })
}

function costOf(board: Board, chord: ChordWish, strings: number, found: Survey): number {
  const { times, sounding, inside, bass, held, lowest, highest, barre, fingers } = found
  const missing = times.filter(each => each === 0).length
  return SHAPE_COST.fretted * held + SHAPE_COST.finger * fingers + (strings - sounding) * SHAPE_COST.muted + inside * SHAPE_COST.mutedInside
    + (barre ? SHAPE_COST.barre : 0) + (chord.tones[0] === chromaOf(bass) ? 0 : SHAPE_COST.inversion) + missing * SHAPE_COST.missing
    + (held ? spanOf(board, lowest, highest) / SHAPE_COST.spanMm + SHAPE_COST.position * (lowest - Math.min(...board.stops)) : 0)
    + (times[1]! > 2 ? SHAPE_COST.thickThird : 0)
}

/**
 * Judges a placement.
 * @param placed frets from the nut, string 1 first; a string's own stop is open, null not played
 * @param bar what a shape must cost less than to be wanted
 * @returns null where it is no shape of this chord: a tone is foreign or wanting, too few strings sound or five fingers are needed
 */
export function judge(board: Board, chord: ChordWish, placed: readonly (number | null)[], bar = Infinity): Shape | null {
  const found = survey(board, chord.tones, placed)
  if (!found || found.sounding < Math.min(4, placed.length) || found.fingers > MOST_FINGERS) return null
  if (found.times.some((each, index) => each === 0 && (index !== 2 || chord.tones.length < 4))) return null
  const cost = costOf(board, chord, placed.length, found)
  if (cost >= bar) return null
  const { times, sounding, bass, held, lowest, highest, barre } = found
  return {
    frets: placed.map((fret, index) => (fret === null ? null : fret - board.stops[index]!)), fingers: fingersOf(board, placed, found),
    barre: barre && { fret: lowest, fromString: barre[1] + 1, toString: barre[0] + 1 }, span: held ? spanOf(board, lowest, highest) : 0,
    inversion: chord.tones.indexOf(chromaOf(bass)),
    doubled: chord.names.flatMap((name, index) => (times[index]! > 1 ? [{ name, times: times[index]! }] : [])),
    missing: chord.names.filter((_, index) => times[index] === 0), open: sounding - held, cost,
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
