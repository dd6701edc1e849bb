import type { Context } from '../score/context'
import { ONE, ZERO, add, equals, fraction, isLess, max, subtract, type Fraction } from '../score/fraction'
import { playedLength, secondsOf } from '../score/time'
import type { Bar, RingRule } from '../score/types'
import { isOpen, secondsToDieOf } from './dying'
import { placedNotes, strokesAt, strokesOn, tiedNote, type Placed, type Stroke } from './strokes'
import type { Ring, RingEnd } from './types'

/** Bars in the order in which they are written, or played, each with what holds in it. */
export interface Sequence { readonly bars: readonly Bar[], readonly contexts: readonly Context[] }

/** Rings of a bar, and the position of the last bar that had a say in them (one past the last where the end did). */
export interface Reach<Value> { readonly value: Value, readonly reach: number }

/** Times at which notes die away are cut to this grid, which keeps fractions small; a hundredth of a beat is not heard at −60 dB. */
const GRID = 128

const lengthAt = ({ bars, contexts }: Sequence, bar: number): Fraction => playedLength(bars[bar]!, contexts[bar]!.meter)

interface Intention { readonly at: Fraction | null, readonly ends: RingEnd, readonly reach: number }

/** Where the arranger lets a note end, following its ties; `at` null: it rings on. A rule on a note outweighs the bar's, that the head's. */
function intention(sequence: Sequence, item: Placed, bar: number): Intention {
  let own: RingRule | undefined
  let offset = ZERO
  for (let at = { item, bar }; ;) {
    own = at.item.note.ring ?? own
    const next = tiedNote(at.item, sequence.bars, at.bar)
    if (!next) {
      const { head } = sequence.contexts[at.bar]!
      const around = sequence.bars[at.bar]!.ring ?? head.ring
      const reach = at.item.note.link === 'tie' ? at.bar + 1 : at.bar
      if ((own ?? around) === 'let-ring') return { at: null, ends: 'string', reach }
      return { at: add(offset, at.item.end), ends: around === 'let-ring' ? 'damp' : 'written', reach }
    }
    if (next.bar > at.bar) offset = add(offset, lengthAt(sequence, at.bar))
    at = next
  }
}

/** The later of two intentions: a note plucked for two voices sounds for the longer. */
function later(a: Intention, b: Intention): Intention {
  const reach = Math.max(a.reach, b.reach)
  if (!a.at || !b.at) return { at: null, ends: 'string', reach }
  return { ...(isLess(a.at, b.at) ? b : a), reach }
}

/** When the string is touched next in a bar, counted from its bar line; only after `from` where that is given. */
function nextTouch(sequence: Sequence, bar: number, string: number, from: Fraction | null): Fraction | null {
  const touch = strokesOn(sequence.bars, bar, string).find(({ heard }) => !from || isLess(from, heard.start))
  return touch?.heard.start ?? null
}

const onGrid = (wholes: number): Fraction => fraction(Math.max(1, Math.floor(wholes * GRID)), GRID)

interface End { readonly at: Fraction, readonly ends: RingEnd }

/** The earliest; of equals the first. */
const earliest = (ends: readonly End[]): End => ends.reduce((best, each) => (isLess(each.at, best.at) ? each : best))

/** The first of intended, forced and free, looked for bar by bar. Times count from the bar line of the bar where the note is struck. */
function endOf(sequence: Sequence, { heard, members }: Stroke, bar: number): Reach<End> {
  const intended = members.map(item => intention(sequence, item, bar)).reduce(later)
  let seconds = secondsToDieOf(sequence.contexts[bar]!.head, heard.note)
  let offset = ZERO
  for (let index = bar; index < sequence.bars.length; index++) {
    const { tempo } = sequence.contexts[index]!
    const end = add(offset, lengthAt(sequence, index))
    const from = max(offset, heard.start)
    const left = secondsOf(subtract(end, from), tempo)
    const touch = nextTouch(sequence, index, heard.note.string, index === bar ? heard.start : null)
    // In order of precedence where two fall together.
    const ends: End[] = []
    if (intended.at && !isLess(end, intended.at)) ends.push({ at: intended.at, ends: intended.ends })
    if (touch) ends.push({ at: add(offset, touch), ends: 'string' })
    if (seconds <= left) ends.push({ at: add(from, onGrid(seconds / secondsOf(ONE, tempo))), ends: 'dies' })
    if (ends.length) return { value: earliest(ends), reach: Math.max(index, intended.reach) }
    seconds -= left
    offset = end
  }
  return { value: { at: offset, ends: 'end' }, reach: sequence.bars.length }
}

function ringOf(sequence: Sequence, stroke: Stroke, bar: number): Reach<Ring> {
  const { note, event, voice, start } = stroke.heard
  const { value: { at, ends }, reach } = endOf(sequence, stroke, bar)
  return {
    value: { noteId: note.id, eventId: event.id, string: note.string, voice, start, sounds: subtract(at, start), ends, open: isOpen(note) },
    reach,
  }
}

/** Rings of the notes struck in a bar, in order of time and string. */
export function ringsAt(sequence: Sequence, bar: number): Reach<readonly Ring[]> {
  const rings = strokesAt(sequence.bars, bar).map(stroke => ringOf(sequence, stroke, bar))
  return { value: rings.map(ring => ring.value), reach: Math.max(bar, ...rings.map(ring => ring.reach)) }
}

/** The ring of any note of a bar: what is left of it where a tie holds it over; null where there is no such note. */
export function ringOfPlaced(sequence: Sequence, bar: number, noteId: string): Ring | null {
  const item = placedNotes(sequence.bars[bar]!).find(each => each.note.id === noteId)
  if (!item) return null
  const stroke = strokesAt(sequence.bars, bar).find(({ heard }) => heard.note.string === item.note.string && equals(heard.start, item.start))
  if (!stroke || stroke.members.includes(item)) return ringOf(sequence, stroke ?? { heard: item, members: [item] }, bar).value
  const { note, event, voice, start } = item
  return { noteId, eventId: event.id, string: note.string, voice, start, sounds: ZERO, ends: 'string', open: isOpen(note) }
}
