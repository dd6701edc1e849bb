import { cursorAt, placeOf, type EditorState, type IdSource, type Transaction } from '../editor'
import { isEqual } from '../score/equal'
import { isFretOnNeck } from '../score/sounding'
import type { Note } from '../score/types'
import { replaceVoice, spliced, withNote } from './change'
import { scoreCommand, type Command } from './command'
import { newEvent } from './entry'

/** 1 then 2 is 12 while nothing else was done in between and the neck has that fret; a third digit starts anew. */
function joined(state: EditorState, note: Note | null, digit: string): number | null {
  const { typed, score, selection } = state
  if (!note || typed?.noteId !== note.id || !/^[1-9]$/.test(typed.digits)) return null
  const fret = Number(typed.digits + digit)
  return isFretOnNeck(score.head, selection.cursor.string, fret) ? fret : null
}

/** The note a digit leaves: id, link and ring of the one that was there stay, its sound is new. */
const fretted = (note: Note | null, id: string, string: number, fret: number): Note =>
  ({ id, string, fret, ...(note?.link && { link: note.link }), ...(note?.ring && { ring: note.ring }) })

/** Enters a digit of a fret on the cursor's string. */
export function enterDigit(state: EditorState, ids: IdSource, digit: string): Transaction {
  const { cursor } = state.selection
  const { bar, voice, at, event, note } = placeOf(state.score, cursor)
  const whole = joined(state, note, digit)
  const fret = whole ?? Number(digit)
  const label = `Enter fret ${fret}`
  if (!isFretOnNeck(state.score.head, cursor.string, fret)) {
    return { label, notice: `String ${cursor.string} has no fret ${fret} on this neck.` }
  }
  const entered = fretted(note, note?.id ?? ids.next(), cursor.string, fret)
  const base = event ?? newEvent(voice, state.entry, ids)
  const unchanged = isEqual(note, entered)
  return {
    label,
    edits: unchanged ? [] : [replaceVoice(bar, cursor.voice, spliced(voice, at, at + 1, [withNote(base, entered)]))],
    selection: { cursor: { ...cursorAt(bar, cursor.voice, at, cursor.string), eventId: base.id }, anchor: null },
    typed: { noteId: entered.id, digits: whole === null ? digit : String(whole), recorded: !unchanged },
    history: whole !== null && state.typed?.recorded ? 'merge' : 'record',
  }
}

const EXAMPLES: Record<string, Command['example']> = {
  0: { before: '3/2q ^3:', after: '3/2q ^3/0q' },
  1: { before: '^3/2q', after: '^3/1q' },
  2: { before: '3/0q ^3:', first: ['fret.1'], after: '3/0q ^3/12q' },
  3: { before: '^3:', first: ['fret.1', 'fret.2'], after: '^3/3q' },
  4: { before: '^2:3/2q', after: '^(2/4 3/2)q' },
  5: { before: '3/0q ^2:zq', after: '3/0q ^2/5q' },
  6: { before: '^3/0hq 3/2q', after: '^3/6hq 3/2q' },
  7: { before: '^3/12<q', after: '^3/7q' },
  8: { before: '3/0e ^6:', after: '3/0e ^6/8e' },
  9: { before: '^3:', first: ['fret.2'], after: '^3/9q' },
}

export const fretCommands: readonly Command[] = [...'0123456789'].map(digit => scoreCommand({
  id: `fret.${digit}`, title: `Fret ${digit}`, group: 'Frets', keys: [digit],
  help: 'On the cursor’s string. A second digit joins the first while nothing else was done in between and the neck has that fret.',
  run: (state, ids) => enterDigit(state, ids, digit),
  example: EXAMPLES[digit],
}))
