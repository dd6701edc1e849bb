import { add, compare, equals, type Fraction } from '../score/fraction'
import { lengthOf, startsOf } from '../score/time'
import { VOICE_NAMES, type Bar, type Note, type ScoreEvent, type Voice, type VoiceName } from '../score/types'

/** A note with its place in the bar, in whole notes from the bar line. */
export interface Placed {
  readonly note: Note
  readonly event: ScoreEvent
  readonly voice: VoiceName
  readonly start: Fraction
  readonly end: Fraction
  /** Position of its event in the voice. */
  readonly index: number
}

/** One touch of one string. */
export interface Stroke {
  /** The note that is heard. */
  readonly heard: Placed
  /** It and, in another voice, the same note at the same moment: plucked once, sounding for the longer. */
  readonly members: readonly Placed[]
}

const placed = new WeakMap<Bar, readonly Placed[]>()

function placeVoice(voice: Voice, name: VoiceName): Placed[] {
  const starts = startsOf(voice)
  return voice.events.flatMap((event, index) => {
    const start = starts[index]!
    const end = add(start, lengthOf(event.length, voice.tuplets))
    return event.notes.map(note => ({ note, event, voice: name, start, end, index }))
  })
}

/** All notes of a bar in order of time, then string, then voice. */
export function placedNotes(bar: Bar): readonly Placed[] {
  let notes = placed.get(bar)
  if (!notes) {
    notes = VOICE_NAMES.flatMap(name => (bar.voices[name] ? placeVoice(bar.voices[name], name) : []))
      .sort((a, b) => compare(a.start, b.start) || a.note.string - b.note.string)
    placed.set(bar, notes)
  }
  return notes
}

/** Same place of the string, so that one pluck can serve both. */
export const isSameTouch = (a: Note, b: Note): boolean =>
  a.string === b.string && a.fret === b.fret && a.harmonic?.partial === b.harmonic?.partial && a.dead === b.dead

const tiedTo = (from: ScoreEvent | undefined, to: Note): boolean =>
  from?.notes.some(note => note.link === 'tie' && isSameTouch(note, to)) ?? false

/** Held over by a tie from the event before in its voice, be it in the bar before; a tie to another fret joins nothing. */
export function isHeldOver(item: Placed, bars: readonly Bar[], bar: number): boolean {
  const before = item.index > 0
    ? bars[bar]?.voices[item.voice]?.events[item.index - 1]
    : bars[bar - 1]?.voices[item.voice]?.events.at(-1)
  return tiedTo(before, item.note)
}

/** The note to which this one is tied, with the position of its bar; null where the tie leads nowhere or there is none. */
export function tiedNote(item: Placed, bars: readonly Bar[], bar: number): { item: Placed, bar: number } | null {
  if (item.note.link !== 'tie') return null
  const count = bars[bar]?.voices[item.voice]?.events.length ?? 0
  const [nextBar, nextIndex] = item.index + 1 < count ? [bar, item.index + 1] : [bar + 1, 0]
  const holder = bars[nextBar]
  const next = holder && placedNotes(holder).find(each =>
    each.voice === item.voice && each.index === nextIndex && isSameTouch(each.note, item.note))
  return next ? { item: next, bar: nextBar } : null
}

/** A string stopped at two places sounds the one nearer the bridge; of a stopped string and a harmonic, the stopped one. */
const louder = (a: Placed, b: Placed): Placed => {
  if (a.note.harmonic && !b.note.harmonic) return b.note.fret > 0 ? b : a
  if (b.note.harmonic && !a.note.harmonic) return a.note.fret > 0 ? a : b
  return b.note.fret > a.note.fret ? b : a
}

interface Touches { readonly before: Bar | undefined, readonly strokes: readonly Stroke[], readonly byString: ReadonlyMap<number, readonly Stroke[]> }

const known = new WeakMap<Bar, Touches>()

function touches(bars: readonly Bar[], bar: number): Touches {
  const before = bars[bar - 1]
  const found = known.get(bars[bar]!)
  if (found && found.before === before) return found
  const strokes = gather(placedNotes(bars[bar]!).filter(item => !isHeldOver(item, bars, bar)))
  const byString = new Map<number, Stroke[]>()
  for (const stroke of strokes) {
    const { string } = stroke.heard.note
    byString.set(string, [...byString.get(string) ?? [], stroke])
  }
  const all = { before, strokes, byString }
  known.set(bars[bar]!, all)
  return all
}

/** The touches of strings in a bar, in order of time and string; two voices on one string at one moment are one touch. */
export const strokesAt = (bars: readonly Bar[], bar: number): readonly Stroke[] => touches(bars, bar).strokes

/** The touches of one string in a bar, in order of time. */
export const strokesOn = (bars: readonly Bar[], bar: number, string: number): readonly Stroke[] => touches(bars, bar).byString.get(string) ?? []

function gather(notes: readonly Placed[]): Stroke[] {
  const strokes: Stroke[] = []
  for (const item of notes) {
    const last = strokes.at(-1)
    if (last && last.heard.note.string === item.note.string && equals(last.heard.start, item.start)) {
      const heard = louder(last.heard, item)
      const members = [...last.members, item].filter(each => isSameTouch(each.note, heard.note))
      strokes[strokes.length - 1] = { heard: members[0]!, members }
    }
    else { strokes.push({ heard: item, members: [item] }) }
  }
  return strokes
}
