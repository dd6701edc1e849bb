import { chromaOf, type Board } from './board'
import type { ChordWish } from './keyChords'
import { MOST_FINGERS, SHAPE_COST, judge, spanOf, type Shape } from './shape'

/** What a hand may be asked for. */
export interface ShapeWish {
  /** Millimetres between the outermost frets, as spans are measured in shared/hand: 115 is a stretch. */
  readonly reach: number
  /** Frets beyond the highest capo in which shapes are looked for. */
  readonly frets: number
  readonly count: number
}
export const USUAL_WISH: ShapeWish = { reach: 115, frets: 12, count: 3 }

/** One thing that a string may do: its fret from the nut (null: not played), the tones it adds (a bit each), whether a finger is above the
 * lowest fret of the window, and the least that it costs. */
interface Offer { readonly fret: number | null, readonly tones: number, readonly above: 0 | 1, readonly cost: number }

const NOT_PLAYED: Offer = { fret: null, tones: 0, above: 0, cost: SHAPE_COST.muted }

/** Offers of one string within a window: open first, then upward, then not played. */
function offers(board: Board, index: number, tones: readonly number[], low: number, high: number): Offer[] {
  const stop = board.stops[index]!
  const toneAt = (fret: number) => tones.indexOf(chromaOf(board.opens[index]! + fret - stop))
  const all: Offer[] = toneAt(stop) < 0 ? [] : [{ fret: stop, tones: 1 << toneAt(stop), above: 0, cost: 0 }]
  for (let fret = Math.max(low, stop + 1); fret <= Math.min(high, board.lastFret); fret += 1) {
    const tone = toneAt(fret)
    if (tone >= 0) all.push({ fret, tones: 1 << tone, above: fret > low ? 1 : 0, cost: SHAPE_COST.fretted + (fret > low ? SHAPE_COST.finger : 0) })
  }
  return [...all, NOT_PLAYED]
}

/** The highest fret within reach of `low`. */
function windowEnd(board: Board, low: number, reach: number): number {
  let high = low
  while (spanOf(board, low, high + 1) <= reach) high += 1
  return Math.min(high, board.lastFret, low + 11)
}

const isPartOf = (a: Shape, b: Shape): boolean => a.frets.every((fret, index) => fret === null || fret === b.frets[index])

/** A shape and the same with more strings left out are one to a player; two that merely share some strings are not. */
const isVariant = (a: Shape, b: Shape): boolean => isPartOf(a, b) || isPartOf(b, a)

/** Tones that must sound: all, save the fifth of a seventh chord. */
const requiredOf = (tones: readonly number[]): number => ((1 << tones.length) - 1) & ~(tones.length > 3 ? 1 << 2 : 0)

/** Best shapes so far, in order, no two of them variants; a search stops going down where the least that it can cost is no better. */
class Best {
  private shapes: readonly Shape[] = []
  constructor(private readonly size: number) {}

  get bar(): number {
    return this.shapes.length < this.size ? Infinity : this.shapes.at(-1)!.cost
  }

  add(shape: Shape): void {
    if (shape.cost >= this.bar || this.shapes.some(each => each.cost <= shape.cost && isVariant(each, shape))) return
    this.shapes = [...this.shapes.filter(each => each.cost <= shape.cost || !isVariant(each, shape)), shape].sort((a, b) => a.cost - b.cost).slice(0, this.size)
  }

  first(count: number): readonly Shape[] {
    return this.shapes.slice(0, count)
  }
}

/** All placements whose lowest fretted place is `low` (0: none is fretted), from the thickest string on. */
function searchWindow(board: Board, chord: ChordWish, low: number, high: number, best: Best): void {
  const base = low ? SHAPE_COST.finger + SHAPE_COST.position * (low - Math.min(...board.stops)) : 0
  if (base >= best.bar) return
  const choices = board.opens.map((_, index) => offers(board, index, chord.tones, low, high))
  const required = requiredOf(chord.tones)
  /** What string 1 to this one can still add, and must still cost at least. */
  const within: number[] = []
  const atLeast: number[] = []
  for (const [index, own] of choices.entries()) {
    let [tones, least] = [0, Infinity]
    for (const each of own) [tones, least] = [tones | each.tones, Math.min(least, each.cost)]
    within.push((within[index - 1] ?? 0) | tones)
    atLeast.push((atLeast[index - 1] ?? 0) + least)
  }
  if (base + atLeast.at(-1)! >= best.bar) return
  const spanCost = Array.from({ length: Math.max(1, high - low + 1) }, (_, step) => spanOf(board, low, low + step) / SHAPE_COST.spanMm)
  const frets: (number | null)[] = board.opens.map(() => null)

  const down = (index: number, tones: number, above: number, top: number, atLow: number, cost: number): void => {
    if (above + (low ? 1 : 0) > MOST_FINGERS || cost + spanCost[top]! + (atLeast[index] ?? 0) >= best.bar) return
    if (index < 0) {
      const shape = (tones & required) === required && (atLow > 0 || low === 0) ? judge(board, chord, frets, best.bar) : null
      if (shape) best.add(shape)
      return
    }
    if (((tones | within[index]!) & required) !== required) return
    for (const each of choices[index]!) {
      frets[index] = each.fret
      const isHeld = each.fret !== null && each.fret > board.stops[index]!
      const isLow = isHeld && each.fret === low
      // A second note at the lowest fret takes a finger or makes a barre.
      const second = isLow && atLow === 1 ? Math.min(SHAPE_COST.finger, SHAPE_COST.barre) : 0
      down(index - 1, tones | each.tones, above + each.above, isHeld ? Math.max(top, each.fret! - low) : top, atLow + (isLow ? 1 : 0), cost + each.cost + second)
    }
    frets[index] = null
  }
  down(board.opens.length - 1, 0, 0, 0, 0, base)
}

/**
 * The best shapes of a chord, by a search of all placements within a hand's reach: at most four fingers (a barre is one), every tone
 * sounding (only the fifth of a seventh chord may be left out), the root lowest where that is easy, open strings before fretted ones.
 * @returns at most `count`, best first (the first is exactly the best); no two that differ only in strings left out
 */
export function findShapes(board: Board, chord: ChordWish, wish: ShapeWish = USUAL_WISH): readonly Shape[] {
  const base = Math.min(...board.stops)
  const best = new Best(wish.count + 2)
  searchWindow(board, chord, 0, -1, best)
  for (let low = base + 1; low <= Math.min(base + wish.frets, board.lastFret); low += 1) {
    searchWindow(board, chord, low, windowEnd(board, low, wish.reach), best)
  }
  return best.first(wish.count)
}
