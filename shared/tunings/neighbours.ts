import { chromaOf, type Board } from './board'
import type { ScalePlace } from './scale'
import { spanOf } from './shape'

/** Two scale steps, one apart, that can ring into each other: on different strings and under one hand. */
export interface Neighbours {
  /** The lower and the higher note. */
  readonly low: ScalePlace
  readonly high: ScalePlace
  /** Millimetres between the two fingers; 0 where one string is open. */
  readonly span: number
  readonly open: 0 | 1 | 2
}

const nutFret = (board: Board, place: ScalePlace): number => board.stops[place.string - 1]! + place.fret

/** Millimetres between two held places; an open string needs no finger. */
export const spanBetweenPlaces = (board: Board, a: ScalePlace, b: ScalePlace): number =>
  (a.fret === 0 || b.fret === 0 ? 0 : Math.abs(spanOf(board, nutFret(board, a), nutFret(board, b))))

/** Pitches of the scale in order, each with the places at which it sounds. */
export function byPitch(places: readonly ScalePlace[]): readonly (readonly ScalePlace[])[] {
  const pitches = [...new Set(places.map(each => each.midi))].sort((a, b) => a - b)
  return pitches.map(midi => places.filter(each => each.midi === midi))
}

/** Whether no pitch of the scale lies between two of its pitches: strings far apart leave gaps that are no steps. */
export function isStep(places: readonly ScalePlace[], low: number, high: number): boolean {
  const chromas = new Set(places.map(({ midi }) => chromaOf(midi)))
  return !Array.from({ length: Math.min(12, high - low - 1) }, (_, index) => low + 1 + index).some(midi => chromas.has(chromaOf(midi)))
}

/**
 * All neighbours, from the lowest pitch up; of one step those with more open strings first, then the narrower.
 * @param places of a scale on this board; leave out frets that should not be used
 * @param reach millimetres that a hand opens
 */
export function neighbours(board: Board, places: readonly ScalePlace[], reach = 115): readonly Neighbours[] {
  const steps = byPitch(places)
  return steps.slice(1).flatMap((highs, index) => (isStep(places, steps[index]![0]!.midi, highs[0]!.midi) ? steps[index]! : []).flatMap(low => highs.flatMap((high): Neighbours[] => {
    const span = spanBetweenPlaces(board, low, high)
    const open = ((low.fret === 0 ? 1 : 0) + (high.fret === 0 ? 1 : 0)) as 0 | 1 | 2
    return low.string === high.string || span > reach ? [] : [{ low, high, span, open }]
  })).sort((a, b) => b.open - a.open || a.span - b.span))
}
