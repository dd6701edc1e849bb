import { equals } from '../score/fraction'
import { capoFret, isFretOnNeck, openMidi } from '../score/sounding'
import type { Head, Note, Score, ScoreEvent, Voice, VoiceName } from '../score/types'
import { carryNotes, isTogether, lastOn, nextOn, touchOf, type Bound, type CarryNotes, type Item, type Place } from './carryNotes'
import { fretDistance } from './neck'

/**
 * Why a note can't be played at its old pitch: too low or too high for every string; a harmonic that no string has; bound to a note
 * (by a slur, a tie or a shared pluck) that can't go with it; or a string has it, but is in use at that moment, is out of the
 * hand's reach, or would be taken out of a slur there.
 */
export type LeftReason = 'low' | 'high' | 'harmonic' | 'bound' | 'taken' | 'reach' | 'slur'

/** A note that stays on its string and fret, and so sounds otherwise. */
export interface LeftNote {
  /** Counted from 1. */
  readonly bar: number
  readonly voice: VoiceName
  readonly note: Note
  readonly reason: LeftReason
  /** The string that has the pitch, for `taken`, `reach` and `slur`. */
  readonly otherString?: number
}

export interface CarriedVoice { readonly bar: string, readonly voice: VoiceName, readonly after: Voice }

export interface Carried {
  /** Voices in which something changes, in the order of the score. */
  readonly voices: readonly CarriedVoice[]
  /** In the order of the score. */
  readonly left: readonly LeftNote[]
  /** Notes with a pitch: in all, as they are, at another fret of their string, on another string. The rest is left. */
  readonly counts: { readonly notes: number, readonly same: number, readonly fret: number, readonly string: number }
  /** Bars, counted from 1, where a grip that was within reach no longer is. */
  readonly wide: readonly number[]
}

interface Work {
  readonly before: Head
  readonly after: Head
  /** Half steps from a string's open pitch in the new tuning up to another's in the old one. */
  readonly rise: (from: number, to: number) => number
  readonly notes: CarryNotes
  readonly reach: number
  /** Where notes are by now; those that are not in it are where they were. */
  readonly places: Map<Item, Place>
}

/** A harmonic's pitch is another string's too only where their open pitches are octaves apart. */
function harmonicOn(work: Work, note: Note, partial: number, string: number): Place | null {
  const wanted = partial * 2 ** (work.rise(string, note.string) / 12)
  const rounded = Math.round(wanted)
  if (Math.abs(wanted - rounded) > 1e-6 || rounded < 2 || rounded > 12) return null
  const fret = rounded === partial ? note.fret : touchOf(rounded)
  return fret === null ? null : { string, fret, harmonic: { partial: rounded } }
}

/** The place on a string at which a note sounds as before; dead notes have no pitch and keep their fret. The fret may be off the neck. */
function placeOn(work: Work, note: Note, string: number): Place | null {
  if (note.dead) return { string, fret: note.fret, ...(note.harmonic && { harmonic: note.harmonic }) }
  if (note.harmonic) return harmonicOn(work, note, note.harmonic.partial, string)
  return { string, fret: note.fret + work.rise(string, note.string) }
}

const placeNow = (work: Work, item: Item): Place => work.places.get(item) ?? item.note

/** Millimetres between the outermost fingers of what is struck at one moment. */
function spanAt(head: Head, struck: readonly Place[]): number {
  const frets = struck.filter(place => place.fret > 0 && place.string <= head.strings.length).map(place => capoFret(head, place.string) + place.fret)
  return frets.length < 2 ? 0 : head.instrument.scaleLength * (fretDistance(Math.max(...frets)) - fretDistance(Math.min(...frets)))
}

const struckWith = (work: Work, item: Item): readonly Item[] => work.notes.bars[item.bar]!.filter(each => !each.note.dead && equals(each.start, item.start))

/** Whether the grip around a note is one that a hand can open to, or at least no wider than it was. */
function isReachable(work: Work, item: Item): boolean {
  const struck = struckWith(work, item)
  return spanAt(work.after, struck.map(each => placeNow(work, each))) <= Math.max(work.reach, spanAt(work.before, struck.map(each => each.note))) + 1e-9
}

const isFree = (work: Work, bound: Bound, item: Item, string: number): boolean =>
  !work.notes.bars[item.bar]!.some(each => !bound.includes(each) && placeNow(work, each).string === string && isTogether(each, item))

/** Whether every link still arrives where it did, with the bound notes as they are placed now. */
function isLinkedAsBefore(work: Work, bound: Bound, string: number): boolean {
  const { bars, targets } = work.notes
  const stringOf = (item: Item) => placeNow(work, item).string
  return bound.every((item) => {
    const before = lastOn(bars, item, string, stringOf)
    return (!item.note.link || nextOn(bars, item, string, stringOf) === targets.get(item)) && (!before?.note.link || targets.get(before) === item)
  })
}

type Trial = { readonly places: readonly Place[], readonly fault?: 'taken' | 'reach' | 'slur' }

/** Bound notes on a string, each at its old pitch; null where the string has not all of them. `fault`: why they can't be there. */
function tryString(work: Work, bound: Bound, string: number): Trial | null {
  const places = bound.map(({ note }) => placeOn(work, note, string))
  if (!places.every((place): place is Place => place !== null && isFretOnNeck(work.after, string, place.fret))) return null
  if (string === bound[0]!.note.string) return { places }
  if (!bound.every(item => isFree(work, bound, item, string))) return { places, fault: 'taken' }
  bound.forEach((item, index) => work.places.set(item, places[index]!))
  const fault = bound.every(item => isReachable(work, item)) ? (isLinkedAsBefore(work, bound, string) ? undefined : 'slur') : 'reach'
  bound.forEach(item => work.places.delete(item))
  return { places, ...(fault && { fault }) }
}

const stringNumbers = ({ after }: Work): number[] => after.strings.map((_, index) => index + 1)

/** Other strings on which bound notes can sound as before, the one nearest to where the hand was first. */
const trialsOf = (work: Work, bound: Bound): readonly (Trial & { readonly string: number })[] => {
  const own = bound[0]!.note
  return stringNumbers(work).filter(string => string !== own.string)
    .map(string => ({ string, trial: tryString(work, bound, string) }))
    .flatMap(({ string, trial }) => (trial ? [{ ...trial, string }] : []))
    .sort((a, b) => Math.abs(a.places[0]!.fret - own.fret) - Math.abs(b.places[0]!.fret - own.fret) || Math.abs(a.string - own.string) - Math.abs(b.string - own.string))
}

const settle = (work: Work, bound: Bound, places: readonly Place[]) => bound.forEach((item, index) => work.places.set(item, places[index]!))

/** Places all that can be placed: first what stays on its string, then the rest on strings that are free, until nothing more finds room.
 * @returns what found none */
function placeAll(work: Work): readonly Bound[] {
  let waiting = work.notes.bound.filter((bound) => {
    const { string } = bound[0]!.note
    const trial = string <= work.after.strings.length ? tryString(work, bound, string) : null
    if (trial) settle(work, bound, trial.places)
    return !trial
  })
  for (let before = -1; before !== waiting.length;) {
    before = waiting.length
    waiting = waiting.filter((bound) => {
      const trial = trialsOf(work, bound).find(each => !each.fault)
      if (trial) settle(work, bound, trial.places)
      return !trial
    })
  }
  return waiting
}

/** Why a note of a group without a place has none. */
function reasonFor(work: Work, bound: Bound, { note }: Item): Pick<LeftNote, 'reason' | 'otherString'> {
  const trials = trialsOf(work, bound)
  const hindered = (['reach', 'slur', 'taken'] as const).map(fault => trials.find(each => each.fault === fault)).find(Boolean)
  if (hindered?.fault) return { reason: hindered.fault, otherString: hindered.string }
  const places = stringNumbers(work).map(string => placeOn(work, note, string))
  if (bound.length > 1 && places.some(place => place && isFretOnNeck(work.after, place.string, place.fret))) return { reason: 'bound' }
  if (note.harmonic) return { reason: 'harmonic' }
  return { reason: places.every(place => place && place.fret < 0) ? 'low' : 'high' }
}

const isSamePlace = (a: Place, b: Place): boolean => a.string === b.string && a.fret === b.fret && a.harmonic?.partial === b.harmonic?.partial

/** Notes from string 1 to the lowest, as events keep them. */
function carriedEvent(event: ScoreEvent, placeOf: ReadonlyMap<Note, Place>): ScoreEvent {
  const notes = event.notes.map((note) => {
    const place = placeOf.get(note)
    return place && !isSamePlace(place, note) ? { ...note, ...place } : note
  })
  return notes.every((note, index) => note === event.notes[index]) ? event : { ...event, notes: notes.toSorted((a, b) => a.string - b.string) }
}

function carriedVoices(score: Score, { notes, places }: Work): CarriedVoice[] {
  return score.bars.flatMap((bar, index) => (Object.keys(bar.voices) as VoiceName[]).flatMap((voice): CarriedVoice[] => {
    const before = bar.voices[voice]!
    const placeOf = new Map(notes.bars[index]!.flatMap(item => (item.voice === voice && places.has(item) ? [[item.note, places.get(item)!] as const] : [])))
    const events = before.events.map(event => carriedEvent(event, placeOf))
    return events.every((event, at) => event === before.events[at]) ? [] : [{ bar: bar.id, voice, after: { ...before, events } }]
  }))
}

function countsOf({ notes, places }: Work): Carried['counts'] {
  const pitched = notes.bars.flat().filter(item => !item.note.dead)
  const placed = pitched.flatMap(item => (places.has(item) ? [{ note: item.note, place: places.get(item)! }] : []))
  const own = placed.filter(({ note, place }) => note.string === place.string)
  const same = own.filter(({ note, place }) => isSamePlace(note, place)).length
  return { notes: pitched.length, same, fret: own.length - same, string: placed.length - own.length }
}

const wideBars = (work: Work): number[] => work.notes.bars.flatMap((items, index) => (items.some(item => !isReachable(work, item)) ? [index + 1] : []))

/**
 * How a score's notes lie when its strings or capos change and each shall sound as before. A note stays on its string while the neck
 * has the fret; else it goes to a string that is free at that moment and within the hand's reach; else it is left as it is written.
 * @param wish the new strings and capos
 * @param reach millimetres that a hand opens (another hand has other limits)
 */
export function carry(score: Score, wish: Pick<Head, 'strings' | 'capos'>, reach = 125): Carried {
  const after: Head = { ...score.head, ...wish }
  const [old, now] = [score.head, after].map(head => head.strings.map((_, index) => openMidi(head, index + 1)))
  const rise = (from: number, to: number) => old![to - 1]! - now![from - 1]!
  const work: Work = { before: score.head, after, rise, notes: carryNotes(score), reach, places: new Map() }
  const waiting = placeAll(work)
  const left = new Map(waiting.flatMap(bound => bound.filter(({ note }) => !note.dead)
    .map(item => [item, { bar: item.bar + 1, voice: item.voice, note: item.note, ...reasonFor(work, bound, item) }] as const)))
  return { voices: carriedVoices(score, work), left: work.notes.bars.flat().flatMap(item => left.get(item) ?? []), counts: countsOf(work), wide: wideBars(work) }
}
