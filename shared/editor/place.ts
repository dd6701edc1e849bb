import { contextOf, type Context } from '../score/context'
import { add, compare, isLess, type Fraction } from '../score/fraction'
import { lengthOf, startsOf, voiceTotal } from '../score/time'
import { VOICE_NAMES, type Bar, type Note, type Score, type ScoreEvent, type Voice, type VoiceName } from '../score/types'
import { END, type Cursor, type Selection } from './state'

export const EMPTY_VOICE: Voice = { events: [] }

/** A cursor looked up in its score. */
export interface Place {
  /** Position of the bar, from 0. */
  readonly index: number
  readonly bar: Bar
  readonly context: Context
  readonly voice: Voice
  /** Position of the event; at the end the number of events. */
  readonly at: number
  readonly event: ScoreEvent | null
  /** The event's note on the cursor's string. */
  readonly note: Note | null
}

/** Looks a cursor up. A bar that is gone reads as the first, an event that is gone as the voice's end.
 * @throws RangeError when the score has no bar */
export function placeOf(score: Score, cursor: Cursor): Place {
  const index = Math.max(0, score.bars.findIndex(bar => bar.id === cursor.barId))
  const bar = score.bars[index]
  if (!bar) throw new RangeError('a score has at least one bar')
  const voice = bar.voices[cursor.voice] ?? EMPTY_VOICE
  const found = cursor.eventId === END ? -1 : voice.events.findIndex(event => event.id === cursor.eventId)
  const event = voice.events[found] ?? null
  const note = event?.notes.find(each => each.string === cursor.string) ?? null
  return { index, bar, context: contextOf(score, index), voice, at: event ? found : voice.events.length, event, note }
}

/** When the event at `at` starts, in whole notes from the bar line; behind the last, the voice's total. */
export const momentOf = (voice: Voice, at: number): Fraction => startsOf(voice)[at] ?? voiceTotal(voice)

/** Position of the event that stands at a moment; behind the last event, the number of events. */
export function eventAt(voice: Voice, moment: Fraction): number {
  const starts = startsOf(voice)
  const at = voice.events.findIndex((event, index) =>
    compare(starts[index]!, moment) <= 0 && isLess(moment, add(starts[index]!, lengthOf(event.length, voice.tuplets))))
  return at < 0 ? voice.events.length : at
}

/** The cursor on the event at a position, or at the end. */
export const cursorAt = (bar: Bar, voice: VoiceName, at: number, string: number): Cursor =>
  ({ barId: bar.id, voice, eventId: bar.voices[voice]?.events[at]?.id ?? END, string })

/** Part of a selection: the events from `from` up to, not including, `to` of one voice of one bar. */
export interface Span { readonly index: number, readonly bar: Bar, readonly name: VoiceName, readonly voice: Voice, readonly from: number, readonly to: number }

interface Spot { readonly index: number, readonly at: number }
interface Range { readonly first: Spot, readonly last: Spot }

function rangeOf(score: Score, { cursor, anchor }: Selection): Range {
  const here = placeOf(score, cursor)
  const there = anchor ? placeOf(score, anchor) : here
  const anchorAt = anchor && anchor.voice !== cursor.voice
    ? eventAt(there.bar.voices[cursor.voice] ?? EMPTY_VOICE, momentOf(there.voice, there.at))
    : there.at
  const [one, other] = [{ index: here.index, at: here.at }, { index: there.index, at: anchorAt }]
  return (one.index - other.index || one.at - other.at) < 0 ? { first: one, last: other } : { first: other, last: one }
}

/** What is selected, bar by bar in reading order: without an anchor the event under the cursor (none at the end), of whole bars every voice. */
export function spansOf(score: Score, selection: Selection): readonly Span[] {
  const { first, last } = rangeOf(score, selection)
  const { voice: own } = selection.cursor
  return score.bars.slice(first.index, last.index + 1).flatMap((bar, offset) => {
    const index = first.index + offset
    const names = selection.whole ? VOICE_NAMES.filter(name => name === own || bar.voices[name]) : [own]
    return names.map((name): Span => {
      const voice = bar.voices[name] ?? EMPTY_VOICE
      const count = voice.events.length
      const from = index === first.index && !selection.whole ? first.at : 0
      const to = index === last.index && !selection.whole ? Math.min(last.at + 1, count) : count
      return { index, bar, name, voice, from, to }
    })
  })
}

/** The bars that the selection touches, in order. */
export function selectedBars(score: Score, selection: Selection): readonly Bar[] {
  const { first, last } = rangeOf(score, selection)
  return score.bars.slice(first.index, last.index + 1)
}

/** A selection with its cursors set on what is still there: after others' edits, an undo, a load. The bar at the old position's side is unknown, so a lost bar reads as the first. */
export function settleSelection(score: Score, selection: Selection): Selection {
  const settled = (cursor: Cursor): Cursor => {
    const { bar, event } = placeOf(score, cursor)
    const string = Math.min(cursor.string, score.head.strings.length)
    return bar.id === cursor.barId && (event?.id ?? END) === cursor.eventId && string === cursor.string
      ? cursor
      : { barId: bar.id, voice: cursor.voice, eventId: event?.id ?? END, string }
  }
  const cursor = settled(selection.cursor)
  const anchor = selection.anchor && settled(selection.anchor)
  return cursor === selection.cursor && anchor === selection.anchor ? selection : { ...selection, cursor, anchor }
}
