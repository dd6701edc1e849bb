import type { Edit } from '../edits'
import { cursorAt, END, eventAt, momentOf, placeOf, EMPTY_VOICE, type Cursor, type EditorState, type IdSource, type Transaction } from '../editor'
import { equals } from '../score/fraction'
import { startsOf } from '../score/time'
import type { Bar, VoiceName } from '../score/types'
import { scoreCommand, type Command } from './command'
import { isFull } from './cursor'

interface Step { readonly cursor: Cursor, readonly entry?: EditorState['entry'], readonly edits?: readonly Edit[], readonly notice?: string }

/** Where Enter leads: the next event, the place behind the last while the bar has room, else the next bar, made where there is none. */
function step({ score, selection }: EditorState, ids: IdSource): Step {
  const { cursor } = selection
  const { index, bar, voice, at, event } = placeOf(score, cursor)
  if (event && at < voice.events.length - 1) return { cursor: cursorAt(bar, cursor.voice, at + 1, cursor.string) }
  if (event && !isFull(score, index, cursor.voice)) {
    return { cursor: { ...cursor, barId: bar.id, eventId: END }, entry: { base: event.length.base, dots: event.length.dots } }
  }
  const next = score.bars[index + 1]
  if (next) return { cursor: cursorAt(next, cursor.voice, 0, cursor.string) }
  if (!Object.keys(bar.voices).length) return { cursor, notice: 'This last bar is still empty.' }
  const appended: Bar = { id: ids.next(), voices: {} }
  return { cursor: cursorAt(appended, cursor.voice, 0, cursor.string), edits: [{ kind: 'insertBars', after: bar.id, bars: [appended] }] }
}

/** Goes on to the next place. */
export function advance(state: EditorState, ids: IdSource): Transaction {
  const { cursor, ...rest } = step(state, ids)
  return { label: rest.edits ? 'Add a bar' : 'Next event', ...rest, selection: { cursor, anchor: null } }
}

/** Goes on; what is entered there takes the length found at the same place of the bar before, so that a rhythm keeps itself. */
export function advanceLike(state: EditorState, ids: IdSource): Transaction {
  const next = advance(state, ids)
  const { cursor } = next.selection!
  if (cursor.eventId !== END) return next
  const entry = lengthBefore(state, cursor, Boolean(next.edits))
  return entry ? { ...next, entry } : next
}

function lengthBefore({ score }: EditorState, cursor: Cursor, appended: boolean): EditorState['entry'] | null {
  const place = appended ? null : placeOf(score, cursor)
  const before = (place ? score.bars[place.index - 1] : score.bars.at(-1))?.voices[cursor.voice]
  const moment = momentOf(place?.voice ?? EMPTY_VOICE, place?.at ?? 0)
  const event = before?.events[startsOf(before).findIndex(start => equals(start, moment))]
  return event ? { base: event.length.base, dots: event.length.dots } : null
}

/** Goes to the other voice at the same moment, or to its end. */
export function otherVoice({ score, selection }: EditorState): Transaction {
  const { cursor } = selection
  const { bar, voice, at } = placeOf(score, cursor)
  const name: VoiceName = cursor.voice === 'upper' ? 'lower' : 'upper'
  const other = eventAt(bar.voices[name] ?? EMPTY_VOICE, momentOf(voice, at))
  return { label: 'Other voice', selection: { cursor: cursorAt(bar, name, other, cursor.string), anchor: null } }
}

export const advanceCommands: readonly Command[] = [
  scoreCommand({
    id: 'cursor.advance', title: 'Go on', group: 'Moving', keys: ['Enter'], run: advance, example: { before: '3/0h ^3/2h', after: '3/0h 3/2h | ^3:h' },
    help: 'To the next event; behind the last, one more of the same length while the bar has room, else the next bar.',
  }),
  scoreCommand({
    id: 'cursor.advanceLike', title: 'Go on in the same rhythm', group: 'Moving', keys: ['Shift+Enter'], run: advanceLike,
    example: { before: '3/0q 3/2e 3/4e | ^3/0q', after: '3/0q 3/2e 3/4e | 3/0q ^3:e' },
    help: 'What is entered there takes the length found at the same place of the bar before.',
  }),
  scoreCommand({
    id: 'cursor.otherVoice', title: 'Other voice', group: 'Moving', keys: ['v'], run: otherVoice, example: { before: '3/0q ^3/2q ; 6/0h', after: '3/0q 3/2q ; ^3:6/0h' },
    help: 'Between melody and thumb, at the same moment.',
  }),
]
