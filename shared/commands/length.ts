import type { Edit } from '../edits'
import { placeOf, spansOf, type EditorState, type IdSource, type Transaction } from '../editor'
import { lengthLabel } from '../editor/describe'
import { compare, equals, fraction, sum, type Fraction } from '../score/fraction'
import { plainLength } from '../score/time'
import { BASES, type Base, type Length, type ScoreEvent, type Tuplet } from '../score/types'
import { changeEvents, replaceVoice, spliced, without } from './change'
import { scoreCommand, type Command } from './command'

type Entry = EditorState['entry']

/** The length of the events selected and of what is entered next. Later events of the voice in that bar move along. */
export function setLength(state: EditorState, entry: Entry): Transaction {
  const edits: readonly Edit[] = changeEvents(state, event =>
    event.length.base === entry.base && event.length.dots === entry.dots ? event : { ...event, length: { ...event.length, ...entry } })
  return { label: `Length: ${lengthLabel(entry)}`, edits, entry }
}

const nameOf = (base: Base): string => lengthLabel({ base, dots: 0 })

/** The length under the cursor, or at the end what is entered next: what a dot acts on. */
function lengthHere(state: EditorState): Entry {
  const { event } = placeOf(state.score, state.selection.cursor)
  return event ? { base: event.length.base, dots: event.length.dots } : state.entry
}

function dot(state: EditorState): Transaction {
  const { base, dots } = lengthHere(state)
  return setLength(state, { base, dots: (dots + 1) % 3 })
}

/** How many events from the start of `events` fill a tuplet of three of a base; null where they don't come out even. */
function filling(events: readonly ScoreEvent[], base: Base): number | null {
  const aim = fraction(3, base)
  for (let count = 1; count <= events.length; count++) {
    const order = compare(sum(events.slice(0, count).map(event => plainLength(event.length))), aim)
    if (order === 0) return count
    if (order > 0) return null
  }
  return null
}

interface Triple { readonly base: Base, readonly count: number }

/** The selected events as three of something. */
function selectedTriple(events: readonly ScoreEvent[]): Triple | null {
  const total: Fraction = sum(events.map(event => plainLength(event.length)))
  const base = BASES.find(each => equals(fraction(3, each), total))
  return base ? { base, count: events.length } : null
}

/** From the cursor on: three of the first event's length or of its half; where the voice ends earlier, the tuplet waits for more. */
function followingTriple(events: readonly ScoreEvent[]): Triple | null {
  const base = events[0]!.length.base
  const half = (base * 2) as Base
  for (const each of [base, half]) {
    const count = BASES.includes(each) ? filling(events, each) : null
    if (count) return { base: each, count }
  }
  const total = sum(events.map(event => plainLength(event.length)))
  return compare(total, fraction(3, base)) < 0 ? { base, count: events.length } : null
}

/** Makes a triplet of the selection, or from the cursor on; in a tuplet, takes the innermost away. */
export function toggleTriplet(state: EditorState, ids: IdSource): Transaction | null {
  const label = 'Triplet'
  const spans = spansOf(state.score, state.selection)
  const [span] = spans
  const first = span?.voice.events[span.from]
  if (!span || !first) return { label, notice: 'Write the first note of the triplet, then make it one.' }
  if (spans.length > 1 || state.selection.whole) return { label, notice: 'A triplet stands within one voice of one bar.' }
  const { bar, name, voice, from, to } = span
  const inner = first.length.tuplets?.at(-1)
  if (inner) {
    const events = voice.events.map(event => ({ ...event, length: outOf(event.length, inner) }))
    return { label: 'Take the tuplet away', edits: [replaceVoice(bar, name, { ...voice, events })] }
  }
  const later = voice.events.slice(from, state.selection.anchor ? to : undefined)
  const clear = later.findIndex(event => event.length.tuplets)
  const free = clear < 0 ? later : later.slice(0, clear)
  const triple = state.selection.anchor ? (clear < 0 ? selectedTriple(later) : null) : followingTriple(free)
  if (!triple) return { label, notice: 'These notes don’t come out as three of one length.' }
  const tuplet: Tuplet = { id: ids.next(), actual: 3, normal: 2, base: triple.base }
  const inside = later.slice(0, triple.count).map(event => ({ ...event, length: { ...event.length, tuplets: [tuplet.id] } }))
  const next = spliced({ ...voice, tuplets: [...voice.tuplets ?? [], tuplet] }, from, from + triple.count, inside)
  return { label, edits: [replaceVoice(bar, name, next)] }
}

function outOf(length: Length, id: string): Length {
  if (!length.tuplets?.includes(id)) return length
  const tuplets = length.tuplets.filter(each => each !== id)
  return tuplets.length ? { ...length, tuplets } : without(length, 'tuplets')
}

const LENGTHS: readonly { base: Base, keys: readonly string[], letter: string }[] = [
  { base: 1, keys: ['w', 'Shift+w'], letter: 'w' },
  { base: 2, keys: ['Shift+h'], letter: 'h' },
  { base: 4, keys: ['q', 'Shift+q'], letter: 'q' },
  { base: 8, keys: ['e', 'Shift+e'], letter: 'e' },
  { base: 16, keys: ['s', 'Shift+s'], letter: 's' },
  { base: 32, keys: ['Shift+t'], letter: 't' },
]

export const lengthCommands: readonly Command[] = [
  ...LENGTHS.map(({ base, keys, letter }) => scoreCommand({
    id: `length.${nameOf(base)}`, title: `${nameOf(base)[0]!.toUpperCase()}${nameOf(base).slice(1)} note`, group: 'Lengths', keys,
    help: 'For the event under the cursor or all that are selected, and for what is entered next.',
    run: state => setLength(state, { base, dots: 0 }),
    example: { before: '^3/0e. 3/2e', after: `^3/0${letter} 3/2e` },
  })),
  scoreCommand({
    id: 'length.dot', title: 'Dot', group: 'Lengths', keys: ['.'], run: dot, example: { before: '3/0q ^3/2q', after: '3/0q ^3/2q.' },
    help: 'Again for a double dot, once more for none.',
  }),
  scoreCommand({
    id: 'length.triplet', title: 'Triplet', group: 'Lengths', keys: ['g'], run: toggleTriplet,
    example: { before: '^3/0e 3/2e 3/4e 3/5q', after: '[3 ^3/0e 3/2e 3/4e] 3/5q' },
    help: 'Groups the selection or the notes from the cursor on. An unfinished triplet takes in what is entered next. In a triplet: takes it away.',
  }),
]
