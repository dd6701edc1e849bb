import { add, compare, equals, isLess, type Fraction } from '../score/fraction'
import { PARTIAL_AT_FRET, soundingMidi } from '../score/sounding'
import { lengthOf, startsOf } from '../score/time'
import { VOICE_NAMES, type Bar, type Harmonic, type Head, type Note, type Score, type VoiceName } from '../score/types'

/** Where a note is played. */
export interface Place { readonly string: number, readonly fret: number, readonly harmonic?: Harmonic }

/** A note with its bar (from 0) and its written time in it, in whole notes. */
export interface Item {
  readonly note: Note
  readonly bar: number
  readonly voice: VoiceName
  readonly start: Fraction
  readonly end: Fraction
}

/** Notes that are on one string together or not at all: slurred, tied, or one pluck for two voices. */
export type Bound = readonly Item[]

export interface CarryNotes {
  /** In the order of bars, voices and events. */
  readonly bars: readonly (readonly Item[])[]
  readonly bound: readonly Bound[]
  /** The note at which a note's link arrives; null where it has a link and no such note is there. */
  readonly targets: ReadonlyMap<Item, Item | null>
}

const itemsOf = (bar: Bar, index: number): Item[] => VOICE_NAMES.flatMap((voice) => {
  const written = bar.voices[voice]
  if (!written) return []
  const starts = startsOf(written)
  return written.events.flatMap((event, at) => event.notes.map(note =>
    ({ note, bar: index, voice, start: starts[at]!, end: add(starts[at]!, lengthOf(event.length, written.tuplets)) })))
})

/** The next note on a string in an item's voice, in its bar or the one behind it, which is as far as a link reaches. @param stringOf says where notes are */
export function nextOn(bars: CarryNotes['bars'], item: Item, string: number, stringOf: (item: Item) => number): Item | null {
  const isThere = (each: Item) => each.voice === item.voice && stringOf(each) === string
  return bars[item.bar]!.find(each => isThere(each) && isLess(item.start, each.start)) ?? bars[item.bar + 1]?.find(isThere) ?? null
}

/** The last note on a string before an item, in its bar or the one before. */
export function lastOn(bars: CarryNotes['bars'], item: Item, string: number, stringOf: (item: Item) => number): Item | null {
  const isThere = (each: Item) => each.voice === item.voice && stringOf(each) === string
  return bars[item.bar]!.findLast(each => isThere(each) && isLess(each.start, item.start)) ?? bars[item.bar - 1]?.findLast(isThere) ?? null
}

const isSamePluck = (a: Item, b: Item): boolean => a.voice !== b.voice && equals(a.start, b.start) && a.note.string === b.note.string
  && a.note.fret === b.note.fret && a.note.harmonic?.partial === b.note.harmonic?.partial && a.note.dead === b.note.dead

/** All notes of a score and what binds them. */
export function carryNotes(score: Score): CarryNotes {
  const bars = score.bars.map(itemsOf)
  const targets = new Map(bars.flat().filter(item => item.note.link)
    .map(item => [item, nextOn(bars, item, item.note.string, each => each.note.string)]))
  const parent = new Map<Item, Item>()
  const root = (item: Item): Item => {
    let at = item
    for (let up = parent.get(at); up; up = parent.get(at)) at = up
    return at
  }
  const bind = (a: Item, b: Item) => {
    const [one, other] = [root(a), root(b)]
    if (one !== other) parent.set(other, one)
  }
  for (const [from, to] of targets) if (to) bind(from, to)
  for (const items of bars) {
    for (const [index, item] of items.entries()) for (const other of items.slice(index + 1)) if (isSamePluck(item, other)) bind(item, other)
  }
  const groups = new Map<Item, Item[]>()
  for (const item of bars.flat()) groups.set(root(item), [...groups.get(root(item)) ?? [], item])
  return { bars, bound: [...groups.values()], targets }
}

/** Where a harmonic of this partial is touched nearest to the nut, in frets; null where no place is known. */
export const touchOf = (partial: number): number | null => {
  const frets = Object.keys(PARTIAL_AT_FRET).map(Number).filter(fret => PARTIAL_AT_FRET[fret] === partial)
  return frets.length ? Math.min(...frets) : null
}

/** Whether two notes of one bar sound at one moment, by their written lengths. */
export const isTogether = (a: Item, b: Item): boolean => compare(a.start, b.end) < 0 && compare(b.start, a.end) < 0

/** Notes that sound otherwise when strings or capos change and frets stay; null where a note's string is not there any more. */
export function soundChanges(score: Score, wish: Pick<Head, 'strings' | 'capos'>): { readonly notes: number, readonly changed: number } | null {
  const after: Head = { ...score.head, ...wish }
  const pitched = score.bars.flatMap(itemsOf).map(item => item.note).filter(note => !note.dead)
  if (pitched.some(note => note.string > after.strings.length)) return null
  return { notes: pitched.length, changed: pitched.filter(note => soundingMidi(after, note) !== soundingMidi(score.head, note)).length }
}
