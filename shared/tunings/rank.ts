import { midiOfText } from '../score/pitch'
import type { Key, OpenString } from '../score/types'
import { chromaOf, keyOf, movedKey, tonicOf } from './board'
import { stringsOf, type CatalogueTuning } from './catalogue'
import { WEIGHTS, bestFit, fitScore, histogramOf, type Fit } from './fit'
import { isGrave, loadOf, type Load } from './load'
import type { Melody } from './melody'
import { retuningPlan, type RetuningPlan } from './retune'
import type { StringSet } from './sets'

export interface RankingRequest {
  readonly melody: Melody
  /** As many strings as the instrument has; others are left out. */
  readonly tunings: readonly CatalogueTuning[]
  /** How the instrument is tuned now: effort is counted from there. */
  readonly from: readonly OpenString[]
  /** Null: load is left out of account. */
  readonly set: StringSet | null
  readonly scaleLength: number
  readonly frets: number
  /** Sounding tonics to try, 0 to 11; absent: all. */
  readonly tonics?: readonly number[]
  /** Highest capo to try, 0 to 7; absent: 7. */
  readonly highestCapo?: number
  /** Most suggestions in all, and of one tuning. */
  readonly keep?: number
  readonly keepOfOne?: number
}

export interface Suggestion {
  readonly tuning: CatalogueTuning
  readonly capo: number
  /** As it sounds. */
  readonly key: Key
  /** As it is fingered and written, the capo left out. */
  readonly written: Key
  readonly fit: Fit
  readonly plan: RetuningPlan
  readonly load: Load | null
  /** 0 to 100. */
  readonly score: number
}

export interface Progress { readonly done: number, readonly total: number }

/** A retuning of two minutes or more earns nothing (ours). */
const LONGEST_SECONDS = 120
/** A capo costs a hair, so that of two equal suggestions the lower is first. */
const CAPO_COST = 0.1

function loadScore(load: Load | null): number {
  if (!load) return 1
  const doubtful = load.strings.filter(each => each.band !== 'green').length
  return isGrave(load) ? 0 : 1 - doubtful / load.strings.length
}

/** The best of one tuning: all keys and capos, best first. */
function* suggestionsOf(tuning: CatalogueTuning, request: RankingRequest, done: number, total: number): Generator<Progress, Suggestion[]> {
  const strings = stringsOf(tuning)
  const { melody, set, scaleLength, frets } = request
  const histogram = histogramOf(melody)
  const plan = retuningPlan(request.from, strings, set ? { set, scaleLength } : undefined)
  const load = set && loadOf(strings, scaleLength, set)
  const rest = WEIGHTS.effort * Math.max(0, 1 - plan.seconds / LONGEST_SECONDS) + WEIGHTS.load * loadScore(load)
  const all: Suggestion[] = []
  const tonics = request.tonics ?? Array.from({ length: 12 }, (_, tonic) => tonic)
  for (const [index, tonic] of tonics.entries()) {
    const key = keyOf(tonic, melody.key.mode)
    for (let capo = 0; capo <= (request.highestCapo ?? 7) && capo < frets; capo += 1) {
      const opens = strings.map(({ pitch, from = 0 }) => midiOfText(pitch) + Math.max(0, capo - from))
      const fit = bestFit(histogram, melody.roots, chromaOf(tonic - tonicOf(melody.key)), { opens, fretsLeft: frets - capo })
      all.push({ tuning, capo, key, written: movedKey(key, -capo), fit, plan, load, score: fitScore(fit) + rest - CAPO_COST * capo })
    }
    yield { done: done + index + 1, total }
  }
  // A capo moves key and strings together, so that what is fingered alike is one suggestion, at its best capo.
  const isFirst = (each: Suggestion, index: number, sorted: readonly Suggestion[]) =>
    sorted.findIndex(other => tonicOf(other.written) === tonicOf(each.written)) === index
  return all.sort((a, b) => b.score - a.score).filter(isFirst).slice(0, request.keepOfOne ?? 3)
}

/**
 * Ranks tunings, keys and capos for a melody, yielding its progress so that a worker can report and stop.
 * @returns the best suggestions, best first
 */
export function* rankTunings(request: RankingRequest): Generator<Progress, readonly Suggestion[]> {
  const tunings = request.tunings.filter(each => each.pitches.length === request.from.length)
  const keys = request.tonics?.length ?? 12
  const found: Suggestion[] = []
  for (const [index, tuning] of tunings.entries()) {
    found.push(...yield* suggestionsOf(tuning, request, index * keys, tunings.length * keys))
  }
  return found.sort((a, b) => b.score - a.score).slice(0, request.keep ?? 30)
}

export interface RankingWatch {
  readonly onProgress?: (progress: Progress) => void
  /** Asked after each pause. */
  readonly isCancelled?: () => boolean
  /** Lets messages in between slices of work. */
  readonly pause: () => Promise<void>
  /** Milliseconds of work between pauses; 16 where absent. */
  readonly slice?: number
  readonly now: () => number
}

/** Runs a ranking in slices.
 * @returns null when it was cancelled */
export async function runRanking(request: RankingRequest, watch: RankingWatch): Promise<readonly Suggestion[] | null> {
  const ranking = rankTunings(request)
  let started = watch.now()
  for (;;) {
    const step = ranking.next()
    if (step.done) return step.value
    if (watch.now() - started < (watch.slice ?? 16)) continue
    watch.onProgress?.(step.value)
    await watch.pause()
    if (watch.isCancelled?.()) return null
    started = watch.now()
  }
}
