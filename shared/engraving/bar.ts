import { ZERO, add, compare, equals, fraction, isLess, max, subtract, type Fraction } from '../score/fraction'
import { barLength, meterLength } from '../score/time'
import type { Context } from '../score/context'
import { VOICE_NAMES, type Bar, type Note, type VoiceName } from '../score/types'
import { beamsOf, type BeamGroup } from './beams'
import { carriedKey, linksOf, type Carried } from './links'
import { reach, restReach, stemByPosition } from './stems'
import { bodyWidth, leastWidth, momentsOf, slicesOf } from './spacing'
import { placeEvents, type Placed } from './staff'
import type { BarNotation, EngravedTuplet, StaffEvent, Stem, TabMark } from './types'

export interface BarSurroundings {
  readonly context: Context
  /** What the bar before hands on. */
  readonly carried: readonly Carried[]
  /** Beats are counted from the bar's end. */
  readonly pickup: boolean
}

/** Contexts that draw alike: a new title makes a new head, yet no bar looks different. */
export const isSameContext = (a: Context, b: Context): boolean =>
  a === b || (a.key === b.key && a.meter === b.meter && (a.head === b.head || (a.head.strings === b.head.strings && a.head.capos === b.head.capos && a.head.ring === b.head.ring)))

const known = new WeakMap<Bar, { context: Context, carried: string, pickup: boolean, notation: BarNotation }>()

/** Notation of a bar. The same object as long as the bar, its context and what ties into it are the same. */
export function engraveBar(bar: Bar, around: BarSurroundings): BarNotation {
  const carried = carriedKey(around.carried)
  const before = known.get(bar)
  if (before && before.carried === carried && before.pickup === around.pickup && isSameContext(before.context, around.context)) return before.notation
  const notation = engrave(bar, around)
  known.set(bar, { context: around.context, carried, pickup: around.pickup, notation })
  return notation
}

function engrave(bar: Bar, { context, carried, pickup }: BarSurroundings): BarNotation {
  const { links } = linksOf(bar, carried)
  const tied = new Map(links.filter(link => link.kind === 'tie' && link.complete && link.to).map(link => [link.to!, link.from ? 'here' as const : 'before' as const]))
  const placed = placeEvents(bar, context, tied)
  const moments = momentsOf(placed.map(each => each.start))
  const offset = pickup ? max(ZERO, subtract(meterLength(context.meter), barLength(bar, context.meter))) : ZERO
  const voices = VOICE_NAMES.filter(name => placed.some(each => each.voice === name && !each.event.hidden))
  const groups = new Map(voices.map(name => [name, voiceBeams(placed.filter(each => each.voice === name), context, offset)]))
  const stems = stemsOf(placed, groups, voices)
  const events = placed.map(each => staffEvent(each, moments, stems, voices, placed))
  const beams = [...groups.values()].flat()
  const beamed = new Set(beams.flatMap(beam => beam.eventIds))
  const tab = tabMarks(placed, moments, tied)
  const ends = endsOf(placed)
  const length = barLength(bar, context.meter)
  const longest = [...ends.values()].reduce(max, ZERO)
  const missing = isLess(longest, length) ? subtract(length, longest) : null
  const total = max(length, longest)
  const slices = slicesOf(moments, events, tab, beamed, longest)
  const reaches = events.filter(event => !event.hidden).map(event => (event.notes.length ? reach(event.notes, event.stem) : restReach(event.restPosition)))
  return {
    events, beams, tab, links, slices, total, missing,
    tuplets: voices.flatMap(name => tupletsOf(bar, name, beamed, stems, voices.length)),
    surplus: [...ends].map(([voice, end]) => ({ voice, amount: subtract(end, length) })).filter(each => !equals(each.amount, ZERO)),
    isPolyphonic: voices.length > 1,
    top: Math.min(0, ...reaches.map(each => each.top)),
    bottom: Math.max(40, ...reaches.map(each => each.bottom)),
    body: bodyWidth(slices, missing), least: leastWidth(slices),
  }
}

/** Where each voice that has events ends. */
function endsOf(placed: readonly Placed[]): ReadonlyMap<VoiceName, Fraction> {
  const ends = new Map<VoiceName, Fraction>()
  for (const name of VOICE_NAMES) {
    const last = placed.findLast(each => each.voice === name)
    if (last) ends.set(name, add(last.start, last.duration))
  }
  return ends
}

interface VoiceBeam { readonly eventIds: readonly string[], readonly breaks: readonly number[] }

function voiceBeams(events: readonly Placed[], context: Context, offset: Fraction): readonly VoiceBeam[] {
  const beamables = events.map(({ event, start, duration }) => ({
    start, duration, base: event.length.base, dots: event.length.dots, tuplet: !!event.length.tuplets?.length, rest: !event.notes.length,
  }))
  return beamsOf(beamables, context.meter, offset).map(({ members, breaks }: BeamGroup) => ({ eventIds: members.map(index => events[index]!.event.id), breaks }))
}

/** Two voices: the upper's stems up, the lower's down. A voice alone, and the middle one, by position, one way to a beam. */
function stemsOf(placed: readonly Placed[], groups: ReadonlyMap<VoiceName, readonly VoiceBeam[]>, voices: readonly VoiceName[]): ReadonlyMap<string, Stem> {
  const fixed: Partial<Record<VoiceName, Stem>> = voices.length > 1 ? { upper: 1, lower: -1 } : {}
  const stems = new Map(placed.map(({ event, voice, notes }) => [event.id, fixed[voice] ?? stemByPosition(notes)]))
  for (const [voice, beams] of groups) {
    if (fixed[voice]) continue
    for (const { eventIds } of beams) {
      const stem = stemByPosition(placed.filter(each => eventIds.includes(each.event.id)).flatMap(each => each.notes))
      for (const id of eventIds) stems.set(id, stem)
    }
  }
  return stems
}

/** With two voices rests leave the middle: the upper's rise, the lower's sink. */
const REST_POSITION: Record<VoiceName, number> = { upper: 8, middle: 4, lower: 0 }
/** Steps from the middle of a rest to a head above or below that it does not touch: half a quarter rest, half a head and a little air. */
const REST_CLEARANCE = 5

/** Where a rest stands: further out where another voice has a note in its column (Gould, "Rests in double-stemmed writing"); on a line. */
function restPosition({ event, voice, start }: Placed, voices: readonly VoiceName[], all: readonly Placed[]): number {
  if (voices.length < 2 || event.notes.length) return REST_POSITION.middle
  const heads = all.filter(each => each.voice !== voice && equals(each.start, start)).flatMap(each => each.notes.map(note => note.position))
  const usual = REST_POSITION[voice]
  if (!heads.length || voice === 'middle') return usual
  return voice === 'upper'
    ? Math.max(usual, 2 * Math.ceil((Math.max(...heads) + REST_CLEARANCE) / 2))
    : Math.min(usual, 2 * Math.floor((Math.min(...heads) - REST_CLEARANCE) / 2))
}

function staffEvent(each: Placed, moments: readonly Fraction[], stems: ReadonlyMap<string, Stem>, voices: readonly VoiceName[], all: readonly Placed[]): StaffEvent {
  const { event, voice, start, duration, notes } = each
  // One rest serves both voices where they rest for the same time.
  const doubled = !notes.length && voice === 'lower' && all.some(other => other.voice === 'upper' && !other.notes.length && !other.event.hidden && equals(other.start, start) && equals(other.duration, duration))
  return {
    eventId: event.id, voice, start, duration, base: event.length.base, dots: event.length.dots, notes,
    slice: moments.findIndex(at => compare(at, start) === 0),
    hidden: !!event.hidden || doubled,
    stem: stems.get(event.id)!,
    restPosition: restPosition(each, voices, all),
  }
}

/** Touched places need not be whole frets. */
const fretText = (note: Note): string => (Number.isInteger(note.fret) ? `${note.fret}` : note.fret.toFixed(1))

/** What the tab says of a note: × dead, <12> harmonic at its touched place, (3) tied over. */
export function tabText(note: Note, isTied: boolean): string {
  if (note.dead) return '×'
  const text = note.harmonic ? `<${fretText(note)}>` : fretText(note)
  return isTied ? `(${text})` : text
}

function tabMarks(placed: readonly Placed[], moments: readonly Fraction[], tied: ReadonlyMap<string, unknown>): readonly TabMark[] {
  const marks: TabMark[] = []
  for (const { event, voice, start } of placed) {
    const slice = moments.findIndex(at => compare(at, start) === 0)
    for (const note of event.notes) {
      const text = tabText(note, tied.has(note.id))
      const here = marks.filter(mark => mark.slice === slice && mark.string === note.string)
      // Both voices on one string with one fret are one plucked note: one number.
      if (here.some(mark => mark.text === text)) continue
      marks.push({ noteId: note.id, eventId: event.id, voice, string: note.string, slice, text, beside: here.length > 0 })
    }
  }
  return marks
}

function tupletsOf(bar: Bar, name: VoiceName, beamed: ReadonlySet<string>, stems: ReadonlyMap<string, Stem>, voices: number): readonly EngravedTuplet[] {
  const voice = bar.voices[name]
  return (voice?.tuplets ?? []).flatMap((tuplet) => {
    const events = voice!.events.filter(event => event.length.tuplets?.includes(tuplet.id))
    if (!events.length) return []
    const stem = stems.get(events[0]!.id)!
    return [{
      eventIds: events.map(event => event.id), actual: tuplet.actual, normal: tuplet.normal,
      bracket: !events.every(event => beamed.has(event.id)),
      above: voices > 1 ? name !== 'lower' : stem === 1,
    }]
  })
}

/** "+¼", "−⅛": how much a voice is over or under, in whole notes. */
export function surplusText(amount: Fraction): string {
  const { n, d } = amount
  const whole = Math.trunc(Math.abs(n) / d)
  const part = fraction(Math.abs(n) % d, d)
  const text = part.n ? (VULGAR[`${part.n}/${part.d}`] ?? `${part.n}/${part.d}`) : ''
  return `${n < 0 ? '−' : '+'}${whole || ''}${text}`
}

const VULGAR: Readonly<Record<string, string>> = {
  '1/2': '½', '1/4': '¼', '3/4': '¾', '1/8': '⅛', '3/8': '⅜', '5/8': '⅝', '7/8': '⅞', '1/3': '⅓', '2/3': '⅔', '1/6': '⅙', '5/6': '⅚',
}
