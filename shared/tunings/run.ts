import type { Board } from './board'
import { byPitch, isStep, spanBetweenPlaces } from './neighbours'
import type { ScalePlace } from './scale'

/** A note of a run and how long it can ring, counted in notes of the run. */
export interface RunNote {
  readonly place: ScalePlace
  /** Index of the note with which it ends; the run's length where it rings to the end. */
  readonly ringsTo: number
  readonly ends: 'string' | 'hand' | 'end'
}

export interface Run {
  readonly up: readonly RunNote[]
  readonly down: readonly RunNote[]
}

/** Weights (ours): a fretted note, a string used again after one other note, a shift of the hand in millimetres, a high fret. */
const COST = { fretted: 1, soonAgain: 1.2, shiftMm: 60, height: 0.08 } as const

interface Path { readonly cost: number, readonly places: readonly ScalePlace[] }

const stepCost = (board: Board, before: ScalePlace | undefined, last: ScalePlace, next: ScalePlace): number =>
  (next.fret ? COST.fretted + COST.height * next.fret : 0) + (before?.string === next.string ? COST.soonAgain : 0)
  + spanBetweenPlaces(board, last, next) / COST.shiftMm

/** Steps of a scale laid so that no two notes in turn share a string; at each pitch the cheapest path to each pair of last two places. */
function paths(board: Board, scale: readonly ScalePlace[], reach: number): ScalePlace[] {
  let longest: Path = { cost: 0, places: [] }
  let open: Path[] = []
  for (const places of byPitch(scale)) {
    const before = open[0]?.places.at(-1)
    if (before && !isStep(scale, before.midi, places[0]!.midi)) open = []
    const started = places.map((place): Path => ({ cost: place.fret ? COST.fretted : 0, places: [place] }))
    const grown = open.flatMap(path => places.flatMap((place): Path[] => {
      const last = path.places.at(-1)!
      if (last.string === place.string || spanBetweenPlaces(board, last, place) > reach) return []
      return [{ cost: path.cost + stepCost(board, path.places.at(-2), last, place), places: [...path.places, place] }]
    }))
    open = bestOfEach([...grown, ...started])
    longest = open.reduce((best, path) =>
      (path.places.length > best.places.length || (path.places.length === best.places.length && path.cost < best.cost) ? path : best), longest)
  }
  return [...longest.places]
}

/** The longest, then cheapest, path for each pair of last places: what comes later depends on nothing else. */
function bestOfEach(all: readonly Path[]): Path[] {
  const best = new Map<string, Path>()
  for (const path of all) {
    const key = path.places.slice(-2).map(({ string, fret }) => `${string}/${fret}`).join()
    const known = best.get(key)
    if (!known || path.places.length > known.places.length || (path.places.length === known.places.length && path.cost < known.cost)) best.set(key, path)
  }
  return [...best.values()]
}

/** When each note ends: its string is used again, or the hand must open further than it can to hold it. */
function rings(board: Board, places: readonly ScalePlace[], reach: number): RunNote[] {
  return places.map((place, index) => {
    const later = places.slice(index + 1)
    const again = later.findIndex(next => next.string === place.string)
    const away = later.findIndex(next => spanBetweenPlaces(board, place, next) > reach)
    const ends = [again, away].filter(at => at >= 0)
    if (ends.length === 0) return { place, ringsTo: places.length, ends: 'end' as const }
    return { place, ringsTo: index + 1 + Math.min(...ends), ends: again >= 0 && (away < 0 || again <= away) ? 'string' as const : 'hand' as const }
  })
}

/**
 * The longest stretch of a scale, step by step, in which no two notes in turn share a string and each pair lies under one hand; among
 * the longest the one with more open strings, strings used again later and less shifting. Down it goes the same places back.
 * @param reach millimetres that a hand opens
 */
export function longestRun(board: Board, places: readonly ScalePlace[], reach = 115): Run {
  const up = paths(board, places, reach)
  return { up: rings(board, up, reach), down: rings(board, [...up].reverse(), reach) }
}

/** What a stretch of places costs, for comparing one way of laying it with another. */
export const runCost = (board: Board, places: readonly ScalePlace[]): number => places.reduce((sum, place, index) =>
  sum + (index === 0 ? (place.fret ? COST.fretted : 0) : stepCost(board, places[index - 2], places[index - 1]!, place)), 0)
