import { ZERO, compare, isLess, subtract, add, type Fraction } from '../score/fraction'
import { soundingMidi } from '../score/sounding'
import { barLength, beatOf, meterLength, playedLength, secondsOf, startsOf } from '../score/time'
import type { Head, LinkKind, Note, Score, VoiceName } from '../score/types'
import { placedNotes, ringsAt, secondsToDieOf, strokesAt, type Placed, type Ring, type Sequence } from '../ring'
import { excerptOf, type Range } from './excerpt'
import type { Moment, Schedule, SoundEvent, SoundNote, Touch } from './types'

/** Ours: the melody stands out a little, and a slur is softer than a pluck. */
const VOICE_LEVEL: Readonly<Record<VoiceName, number>> = { upper: 0.9, middle: 0.75, lower: 0.75 }
const TOUCH_LEVEL: Readonly<Record<Touch, number>> = { 'pluck': 1, 'hammer-on': 0.7, 'pull-off': 0.65, 'dead': 0.8 }

const touchOf = (note: Note, link: LinkKind | undefined): Touch =>
  (note.dead ? 'dead' : link === 'hammer-on' || link === 'pull-off' ? link : 'pluck')

/** One note as the string model needs it; `link` is that of the note which leads to it. */
export function soundOf(head: Head, note: Note, voice: VoiceName, link?: LinkKind): SoundNote {
  const touch = touchOf(note, link)
  return {
    noteId: note.id, string: note.string, midi: soundingMidi(head, note), touch,
    velocity: VOICE_LEVEL[voice] * TOUCH_LEVEL[touch], seconds: secondsToDieOf(head, note),
    ...(note.harmonic && { harmonic: true as const }),
  }
}

const ORDER: Readonly<Record<SoundEvent['kind'], number>> = { damp: 0, sound: 1, click: 2 }

/** What is to be heard of a score, in seconds at its written tempo. */
export function scheduleOf(score: Score, range: Range = {}): Schedule {
  const excerpt = excerptOf(score, range)
  const { sequence } = excerpt
  const clock = clockOf(sequence, excerpt.from)
  const last = sequence.bars.length - 1
  const length = clock(last, excerpt.to)
  const isHeard = (event: { at: number }) => event.at >= -1e-9 && event.at < length - 1e-9
  const open = new Map<string, LinkKind | undefined>()
  const sounds = sequence.bars.flatMap((_, bar) => soundsOfBar(sequence, bar, clock, open))
  const clicks = sequence.bars.flatMap((_, bar) => clicksOfBar(sequence, score, bar, clock)).filter(isHeard)
  const moments = sequence.bars.flatMap((_, bar) => momentsOfBar(sequence, bar, clock))
  return {
    length,
    events: [...sounds, ...clicks].sort((a, b) => a.at - b.at || ORDER[a.kind] - ORDER[b.kind]),
    moments: moments.filter((moment, index) => isHeard(moment) || (moment.at < 0 && (moments[index + 1]?.at ?? length) > 0)),
  }
}

/** Seconds of a moment in a bar (whole notes from its bar line, also beyond it) from the beginning of the excerpt. */
type Clock = (bar: number, at: Fraction) => number

function clockOf({ bars, contexts }: Sequence, from: Fraction): Clock {
  const lengths = bars.map((bar, index) => playedLength(bar, contexts[index]!.meter))
  let sum = -secondsOf(from, contexts[0]!.tempo)
  const starts = lengths.map((length, index) => {
    const start = sum
    sum += secondsOf(length, contexts[index]!.tempo)
    return start
  })
  return (bar, at) => {
    let [index, rest] = [bar, at]
    while (index < bars.length - 1 && !isLess(rest, lengths[index]!)) rest = subtract(rest, lengths[index++]!)
    return starts[index]! + secondsOf(rest, contexts[index]!.tempo)
  }
}

/** Whether the hand, or what is written, ends the note; a string played again ends it by itself, and the rest dies away. */
const isDamped = (ring: Ring): boolean => ring.ends === 'written' || ring.ends === 'damp'

/** The link by which each note of a bar is reached; `open` carries each string's last link, by voice, from bar to bar. */
function linksInto(notes: readonly Placed[], open: Map<string, LinkKind | undefined>): Map<string, LinkKind | undefined> {
  return new Map(notes.map(({ note, voice }) => {
    const path = `${voice} ${note.string}`
    const link = open.get(path)
    open.set(path, note.link)
    return [note.id, link]
  }))
}

function soundsOfBar(sequence: Sequence, bar: number, clock: Clock, open: Map<string, LinkKind | undefined>): SoundEvent[] {
  const { head } = sequence.contexts[bar]!
  const rings = ringsAt(sequence, bar).value
  const links = linksInto(placedNotes(sequence.bars[bar]!), open)
  return strokesAt(sequence.bars, bar).flatMap(({ heard: { note, voice, start } }, index): SoundEvent[] => {
    const ring = rings[index]!
    const sound: SoundEvent = { kind: 'sound', at: clock(bar, start), note: soundOf(head, note, voice, links.get(note.id)) }
    if (!isDamped(ring)) return [sound]
    return [sound, { kind: 'damp', at: clock(bar, add(start, ring.sounds)), string: note.string, noteId: note.id }]
  })
}

/** A short bar at the beginning, or behind a repeat, is a pickup: its beats are the last of the meter. Elsewhere it breaks off. */
function clicksOfBar({ bars, contexts }: Sequence, score: Score, index: number, clock: Clock): SoundEvent[] {
  const bar = bars[index]!
  const { meter } = contexts[index]!
  const written = score.bars.findIndex(each => each.id === bar.id)
  const isPickup = written === 0 || bar.repeatStart === true || score.bars[written - 1]?.repeatEnd !== undefined
  const missing = subtract(meterLength(meter), barLength(bar, meter))
  const played = playedLength(bar, meter)
  const clicks: SoundEvent[] = []
  for (let beat = 0, at = isPickup && missing.n > 0 ? subtract(ZERO, missing) : ZERO; isLess(at, played); beat++, at = add(at, beatOf(meter))) {
    if (at.n >= 0) clicks.push({ kind: 'click', at: clock(index, at), accent: beat === 0 })
  }
  return clicks
}

function momentsOfBar({ bars }: Sequence, index: number, clock: Clock): Moment[] {
  const bar = bars[index]!
  const tracks = Object.values(bar.voices).map(voice => ({ voice: voice!, starts: startsOf(voice!) }))
  const times = [ZERO, ...tracks.flatMap(track => track.starts)].sort(compare).filter((at, place, all) => place === 0 || isLess(all[place - 1]!, at))
  return times.map(at => ({
    at: clock(index, at), barId: bar.id,
    eventIds: tracks.flatMap(({ voice, starts }) => voice.events[starts.findLastIndex(start => compare(start, at) <= 0)]?.id ?? []),
  }))
}

/** The moment that holds at a time, by halving; null before the first. */
export function momentAt(schedule: Schedule, seconds: number): Moment | null {
  let [low, high] = [0, schedule.moments.length]
  while (low < high) {
    const middle = (low + high) >> 1
    if (schedule.moments[middle]!.at <= seconds) low = middle + 1
    else high = middle
  }
  return schedule.moments[low - 1] ?? null
}
