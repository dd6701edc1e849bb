import { cursorAt, END, placeOf, selectedBars, type Cursor, type EditorState, type Selection, type Transaction } from '../editor'
import { compare, ZERO } from '../score/fraction'
import { surplus } from '../score/time'
import type { Bar, Score, VoiceName } from '../score/types'
import { contextOf } from '../score/context'
import { scoreCommand, type Command, type Intent } from './command'

/** A full bar's end is no place of its own while moving by events: the next one is the next bar. */
export const isFull = (score: Score, index: number, voice: VoiceName): boolean => {
  const bar = score.bars[index]
  return Boolean(bar?.voices[voice]) && compare(surplus(bar!.voices[voice], bar!, contextOf(score, index).meter), ZERO) >= 0
}

const lastPlace = (score: Score, index: number, voice: VoiceName): number => {
  const count = score.bars[index]!.voices[voice]?.events.length ?? 0
  return isFull(score, index, voice) && index < score.bars.length - 1 ? count - 1 : count
}

type Move = (score: Score, cursor: Cursor) => Cursor

const onto = (bar: Bar, cursor: Cursor, at: number): Cursor => cursorAt(bar, cursor.voice, at, cursor.string)

const byString = (step: number): Move => ({ head }, cursor) =>
  ({ ...cursor, string: Math.min(Math.max(cursor.string + step, 1), head.strings.length) })

const toNextEvent: Move = (score, cursor) => {
  const { index, bar, at } = placeOf(score, cursor)
  if (at < lastPlace(score, index, cursor.voice)) return onto(bar, cursor, at + 1)
  const next = score.bars[index + 1]
  return next ? onto(next, cursor, 0) : cursor
}

const toPreviousEvent: Move = (score, cursor) => {
  const { index, bar, at } = placeOf(score, cursor)
  if (at > 0) return onto(bar, cursor, at - 1)
  const before = score.bars[index - 1]
  return before ? onto(before, cursor, lastPlace(score, index - 1, cursor.voice)) : cursor
}

const toNextBar: Move = (score, cursor) => {
  const { index, bar } = placeOf(score, cursor)
  const next = score.bars[index + 1]
  return next ? onto(next, cursor, 0) : toBarEnd(score, { ...cursor, barId: bar.id })
}

const toPreviousBar: Move = (score, cursor) => {
  const { index, bar, at } = placeOf(score, cursor)
  return onto(at > 0 ? bar : score.bars[index - 1] ?? bar, cursor, 0)
}

const toBarStart: Move = (score, cursor) => onto(placeOf(score, cursor).bar, cursor, 0)
const toBarEnd: Move = (score, cursor) => ({ ...cursor, barId: placeOf(score, cursor).bar.id, eventId: END })
const toPieceStart: Move = (score, cursor) => onto(score.bars[0]!, cursor, 0)
const toPieceEnd: Move = (score, cursor) => ({ ...cursor, barId: score.bars.at(-1)!.id, eventId: END })

const move = (label: string, by: Move) => ({ score, selection }: EditorState): Transaction =>
  ({ label, selection: { cursor: by(score, selection.cursor), anchor: null } })

/** Extends the selection by events. */
const extend = (label: string, by: Move) => ({ score, selection }: EditorState): Transaction =>
  ({ label, selection: { cursor: by(score, selection.cursor), anchor: selection.anchor ?? selection.cursor } })

/** The bar that a selection of whole bars reaches to next, by position; where none is selected whole yet, first the cursor's own. */
type Reach = (index: number, last: number, whole: boolean) => number

/** Extends the selection by whole bars: it begins and ends at bar lines. */
const extendBars = (label: string, reach: Reach) => ({ score, selection }: EditorState): Transaction => {
  const { cursor, anchor, whole } = selection
  const last = score.bars.length - 1
  const from = placeOf(score, anchor ?? cursor).index
  const to = Math.min(Math.max(reach(placeOf(score, cursor).index, last, Boolean(whole)), 0), last)
  return { label, selection: barsBetween(score, cursor, from, to) }
}

/** All of the bars from one to another, with the cursor on the side of `to`. */
function barsBetween(score: Score, cursor: Cursor, from: number, to: number): Selection {
  const start = (index: number): Cursor => onto(score.bars[index]!, cursor, 0)
  const end = (index: number): Cursor => ({ ...cursor, barId: score.bars[index]!.id, eventId: END })
  return to < from ? { anchor: end(from), cursor: start(to), whole: true } : { anchor: start(from), cursor: end(to), whole: true }
}

interface Motion { readonly id: string, readonly title: string, readonly key: string, readonly by: Move, readonly reach?: Reach, readonly moved: [string, string], readonly extended: [string, string] }

const MOTIONS: readonly Motion[] = [
  { id: 'stringUp', title: 'String above', key: 'ArrowUp', by: byString(-1), moved: ['^3/0q', '^2:3/0q'], extended: ['^3/0q', '@^2:3/0q'] },
  { id: 'stringDown', title: 'String below', key: 'ArrowDown', by: byString(1), moved: ['^3/0q', '^4:3/0q'], extended: ['^3/0q', '@^4:3/0q'] },
  { id: 'previous', title: 'Previous event', key: 'ArrowLeft', by: toPreviousEvent, moved: ['3/0w | ^3/2q', '^3/0w | 3/2q'], extended: ['3/0q ^3/2q', '^3/0q @3/2q'] },
  { id: 'next', title: 'Next event', key: 'ArrowRight', by: toNextEvent, moved: ['^3/0q', '3/0q ^3:'], extended: ['^3/0q 3/2q', '@3/0q ^3/2q'] },
  { id: 'previousBar', title: 'Previous bar', key: 'Jump+ArrowLeft', by: toPreviousBar, reach: (index, _, whole) => (whole ? index - 1 : index), moved: ['3/0w | 3/2q ^3/4q', '3/0w | ^3/2q 3/4q'], extended: ['3/0w | 3/2q ^3/4q', '3/0w | @3/2q 3/4q ^3:'] },
  { id: 'nextBar', title: 'Next bar', key: 'Jump+ArrowRight', by: toNextBar, reach: (index, _, whole) => (whole ? index + 1 : index), moved: ['^3/0q 3/2q | 3/4q', '3/0q 3/2q | ^3/4q'], extended: ['3/0h ^3/2h | 3/4q', '@3/0h 3/2h ^3: | 3/4q'] },
  { id: 'barStart', title: 'Start of the bar', key: 'Home', by: toBarStart, moved: ['3/0q 3/2q ^3/4q', '^3/0q 3/2q 3/4q'], extended: ['3/0q ^3/2q', '^3/0q @3/2q'] },
  { id: 'barEnd', title: 'End of the bar', key: 'End', by: toBarEnd, moved: ['^3/0w', '3/0w ^3:'], extended: ['^3/0q 3/2q', '@3/0q 3/2q ^3:'] },
  { id: 'pieceStart', title: 'Start of the piece', key: 'Jump+Home', by: toPieceStart, reach: () => 0, moved: ['3/0w | 3/2w | ^3/4w', '^3/0w | 3/2w | 3/4w'], extended: ['3/0w | ^3/2w', '^3/0w | 3/2w @3:'] },
  { id: 'pieceEnd', title: 'End of the piece', key: 'Jump+End', by: toPieceEnd, reach: (_, last) => last, moved: ['^3/0w | 3/2w', '3/0w | 3/2w ^3:'], extended: ['^3/0w | 3/2w', '@3/0w | 3/2w ^3:'] },
]

const withShift = (key: string): string => key.replace(/([^+]+)$/, 'Shift+$1')

const system = (by: -1 | 1, extend: boolean) => (): Intent => ({ intent: 'system', by, extend })

export const cursorCommands: readonly Command[] = [
  ...MOTIONS.map(({ id, title, key, by, moved: [before, after] }) =>
    scoreCommand({ id: `cursor.${id}`, title, group: 'Moving', keys: [key], run: move(title, by), example: { before, after } })),
  scoreCommand({ id: 'cursor.systemUp', title: 'System above', group: 'Moving', keys: ['PageUp'], run: system(-1, false) }),
  scoreCommand({ id: 'cursor.systemDown', title: 'System below', group: 'Moving', keys: ['PageDown'], run: system(1, false) }),
]

export const extendCommands: readonly Command[] = [
  ...MOTIONS.map(({ id, title, key, by, reach, extended: [before, after] }) => scoreCommand({
    id: `selection.${id}`, title: `Select to: ${title.toLowerCase()}`, group: 'Selection', keys: [withShift(key)],
    run: reach ? extendBars(`Select to: ${title.toLowerCase()}`, reach) : extend(`Select to: ${title.toLowerCase()}`, by),
    example: { before, after }, ...(reach && { help: 'Takes whole bars with all their voices.' }),
  })),
  scoreCommand({ id: 'selection.systemUp', title: 'Select to: system above', group: 'Selection', keys: ['Shift+PageUp'], run: system(-1, true) }),
  scoreCommand({ id: 'selection.systemDown', title: 'Select to: system below', group: 'Selection', keys: ['Shift+PageDown'], run: system(1, true) }),
  scoreCommand({
    id: 'selection.all', title: 'Select all', group: 'Selection', keys: ['Mod+a'], example: { before: '3/0w | ^3/2w', after: '@3/0w | 3/2w ^3:' },
    run: ({ score, selection }): Transaction => ({ label: 'Select all', selection: barsBetween(score, selection.cursor, 0, score.bars.length - 1) }),
  }),
  scoreCommand({
    id: 'selection.bars', title: 'Select whole bars', group: 'Selection', keys: [], example: { before: '@3/0q ^3/2q 3/4q', after: '@3/0q 3/2q 3/4q ^3:' },
    run: ({ score, selection }): Transaction => {
      const bars = selectedBars(score, selection)
      const from = score.bars.indexOf(bars[0]!)
      return { label: 'Select whole bars', selection: barsBetween(score, selection.cursor, from, from + bars.length - 1) }
    },
  }),
  scoreCommand({
    id: 'selection.clear', title: 'Drop the selection', group: 'Selection', keys: ['Escape'], example: { before: '@3/0q ^3/2q', after: '3/0q ^3/2q' },
    run: ({ selection }): Transaction | null => (selection.anchor ? { label: 'Drop the selection', selection: { cursor: selection.cursor, anchor: null } } : null),
  }),
]
