import { contextsOf, type Context } from '../score/context'
import { isEqual } from '../score/equal'
import { ZERO, add, compare, equals, min, subtract, type Fraction } from '../score/fraction'
import { openMidi } from '../score/sounding'
import { playedLength, secondsOf } from '../score/time'
import type { Bar, Head, Score } from '../score/types'
import { secondsToDie } from './dying'
import { ringOfPlaced, ringsAt, type Sequence } from './rings'
import type { Lane, Ring } from './types'

const sequenceOf = (score: Score): Sequence => ({ bars: score.bars, contexts: contextsOf(score) })

const NONE: readonly never[] = []

interface Known {
  /** The bar before, the bar itself and those looked at behind it, with their contexts; undefined: no bar there. */
  readonly bars: readonly (Bar | undefined)[]
  readonly contexts: readonly (Context | undefined)[]
  readonly rings: readonly Ring[]
}

const knownRings = new WeakMap<Bar, Known>()

const isUnchanged = (known: Known, sequence: Sequence, index: number): boolean =>
  known.bars.every((bar, step) => bar === sequence.bars[index - 1 + step] && known.contexts[step] === sequence.contexts[index - 1 + step])

/** What was there if it says the same, so that those who compare by identity see no change. */
const kept = <Value>(before: Value | undefined, now: Value): Value => (before !== undefined && isEqual(before, now) ? before : now)

function ringsIn(sequence: Sequence, index: number): readonly Ring[] {
  const bar = sequence.bars[index]
  if (!bar) return NONE
  const known = knownRings.get(bar)
  if (known && isUnchanged(known, sequence, index)) return known.rings
  const { value, reach } = ringsAt(sequence, index)
  const places = Array.from({ length: reach - index + 2 }, (_, step) => index - 1 + step)
  const rings = kept(known?.rings, value)
  knownRings.set(bar, { bars: places.map(at => sequence.bars[at]), contexts: places.map(at => sequence.contexts[at]), rings })
  return rings
}

/** Rings of the notes struck in the bar at `index`, in order of time and string; the same array while nothing changed for them. */
export const ringsOfBar = (score: Score, index: number): readonly Ring[] => ringsIn(sequenceOf(score), index)

/** The ring of a note: what is left of it where a tie holds it over; null where the bar has no such note. */
export const ringOfNote = (score: Score, index: number, noteId: string): Ring | null =>
  (score.bars[index] ? ringOfPlaced(sequenceOf(score), index, noteId) : null)

const longest = new WeakMap<Head, number>()

/** Seconds after which the lowest string has died away: nothing older can still sound. */
function longestRing(head: Head): number {
  const seconds = longest.get(head) ?? Math.max(...head.strings.map((_, index) => secondsToDie(openMidi(head, index + 1), true)))
  longest.set(head, seconds)
  return seconds
}

const knownSeconds = new WeakMap<Bar, { context: Context, seconds: number }>()

function secondsOfBar(bar: Bar, context: Context): number {
  const known = knownSeconds.get(bar)
  if (known?.context === context) return known.seconds
  const seconds = secondsOf(playedLength(bar, context.meter), context.tempo)
  knownSeconds.set(bar, { context, seconds })
  return seconds
}

interface Incoming { readonly rings: readonly Ring[], /** From the bar line of those rings to this bar's. */ readonly before: Fraction }

/** The bar's own rings and those of the bars before which may still sound in it, the latest first. */
function incoming(sequence: Sequence, index: number): Incoming[] {
  const { bars, contexts } = sequence
  const found: Incoming[] = [{ rings: ringsIn(sequence, index), before: ZERO }]
  let before = ZERO
  let seconds = longestRing(contexts[index]!.head)
  for (let at = index - 1; at >= 0 && seconds > 0; at--) {
    before = add(before, playedLength(bars[at]!, contexts[at]!.meter))
    seconds -= secondsOfBar(bars[at]!, contexts[at]!)
    found.push({ rings: ringsIn(sequence, at), before })
  }
  return found
}

const lane = (ring: Ring, before: Fraction, length: Fraction): Lane => {
  const from = subtract(ring.start, before)
  const to = add(from, ring.sounds)
  const starts = compare(from, ZERO) >= 0
  return {
    noteId: ring.noteId, string: ring.string, open: ring.open, starts,
    from: starts ? from : ZERO, to: min(to, length), ends: compare(to, length) <= 0,
  }
}

const knownLanes = new WeakMap<Bar, { sources: readonly Incoming[], length: Fraction, lanes: readonly Lane[] }>()

const isSame = (a: readonly Incoming[], b: readonly Incoming[]): boolean =>
  a.length === b.length && a.every((each, at) => each.rings === b[at]!.rings && equals(each.before, b[at]!.before))

/** What rings in the bar at `index`, struck here or before, clipped to it; by string, then time. The same array while nothing changed. */
export function lanesOfBar(score: Score, index: number): readonly Lane[] {
  const bar = score.bars[index]
  if (!bar) return NONE
  const sequence = sequenceOf(score)
  const sources = incoming(sequence, index)
  const length = playedLength(bar, sequence.contexts[index]!.meter)
  const known = knownLanes.get(bar)
  if (known && isSame(known.sources, sources) && equals(known.length, length)) return known.lanes
  const lanes = sources
    .flatMap(({ rings, before }) => rings.filter(ring => compare(add(ring.start, ring.sounds), before) > 0).map(ring => lane(ring, before, length)))
    .sort((a, b) => a.string - b.string || compare(a.from, b.from))
  const result = kept(known?.lanes, lanes)
  knownLanes.set(bar, { sources, length, lanes: result })
  return result
}
