import { contextsOf } from '../score/context'
import { ZERO, add, compare, isLess, type Fraction } from '../score/fraction'
import { lengthOf, playedLength, startsOf } from '../score/time'
import type { Bar, Score, ScoreEvent, Voice, VoiceName } from '../score/types'
import type { Sequence } from '../ring'
import { unroll } from './unroll'

/** An event's place in the score; an id that is not in the voice (the open end) stands for the bar's beginning. */
export interface Place { readonly barId: string, readonly voice: VoiceName, readonly eventId: string }

/** What is to be heard: from a place to the end with repeats, or from one place through another as written. */
export interface Range { readonly from?: Place, readonly through?: Place }

/** Bars as played, with the moments between which they are heard. */
export interface Excerpt {
  readonly sequence: Sequence
  /** In the first bar. */
  readonly from: Fraction
  /** In the last bar. */
  readonly to: Fraction
}

const keepNotes = (voice: Voice, isKept: (start: Fraction) => boolean): Voice => {
  const starts = startsOf(voice)
  return { ...voice, events: voice.events.map((event, index): ScoreEvent => (isKept(starts[index]!) ? event : { ...event, notes: [] })) }
}

/** Leaves out the notes that start outside of the excerpt, so that a note tied over its beginning is struck anew. */
function silence(bar: Bar, isKept: (start: Fraction) => boolean): Bar {
  const voices = Object.entries(bar.voices).map(([name, voice]) => [name, voice && keepNotes(voice, isKept)])
  return { ...bar, voices: Object.fromEntries(voices) }
}

function startOf(bar: Bar, place: Place): Fraction {
  const voice = bar.voices[place.voice]
  const index = voice?.events.findIndex(event => event.id === place.eventId) ?? -1
  return voice && index >= 0 ? startsOf(voice)[index]! : ZERO
}

function endOf(bar: Bar, place: Place, whole: Fraction): Fraction {
  const voice = bar.voices[place.voice]
  const event = voice?.events.find(each => each.id === place.eventId)
  return voice && event ? add(startOf(bar, place), lengthOf(event.length, voice.tuplets)) : whole
}

/** The bars of a range in playing order. A range of which both ends are given is taken in the order of the score. */
export function excerptOf(score: Score, range: Range): Excerpt {
  const indexOf = (place: Place | undefined) => (place ? Math.max(0, score.bars.findIndex(bar => bar.id === place.barId)) : 0)
  const [first, last] = inOrder(score, range)
  const begin = indexOf(first)
  const order = last ? score.bars.map((_, index) => index).slice(begin, indexOf(last) + 1) : from(unroll(score.bars), begin)
  const contexts = order.map(index => contextsOf(score)[index]!)
  const bars = order.map(index => score.bars[index]!)
  const start = first ? startOf(bars[0]!, first) : ZERO
  const final = bars.length - 1
  const whole = playedLength(bars[final]!, contexts[final]!.meter)
  const end = last ? endOf(bars[final]!, last, whole) : whole
  if (start.n > 0) bars[0] = silence(bars[0]!, at => !isLess(at, start))
  if (last) bars[final] = silence(bars[final]!, at => isLess(at, end))
  return { sequence: { bars, contexts }, from: start, to: end }
}

const from = (order: readonly number[], begin: number): readonly number[] => order.slice(Math.max(0, order.indexOf(begin)))

function inOrder(score: Score, { from, through }: Range): [Place | undefined, Place | undefined] {
  if (!from || !through) return [from, through]
  const position = (place: Place) => score.bars.findIndex(bar => bar.id === place.barId)
  const difference = position(from) - position(through)
  const bar = score.bars[position(from)]
  const isTurned = difference > 0 || (difference === 0 && bar !== undefined && compare(startOf(bar, from), startOf(bar, through)) > 0)
  return isTurned ? [through, from] : [from, through]
}
