import { cursorAt, EMPTY_VOICE, END, placeOf, spansOf, type EditorState, type IdSource, type Place, type Transaction } from '../editor'
import { isEqual } from '../score/equal'
import { PARTIAL_AT_FRET } from '../score/sounding'
import type { Bar, Head, LinkKind, Note, RingRule } from '../score/types'
import { removeBars } from './bar'
import { changeEvents, replaceVoice, spliced, without, withNote, withNotes } from './change'
import { scoreCommand, type Command } from './command'
import { newEvent } from './entry'

const here = ({ score, selection }: EditorState): Place => placeOf(score, selection.cursor)

const noNote = (state: EditorState, label: string): Transaction =>
  ({ label, notice: state.selection.anchor ? 'There is no note in the selection.' : `There is no note on string ${state.selection.cursor.string} here.` })

/** Changes the note under the cursor, or every selected note, where the first one says which way. */
function changeNotes(state: EditorState, label: string, change: (note: Note, bar: Bar) => Note): Transaction {
  const { anchor, cursor } = state.selection
  const changed = (note: Note, bar: Bar): Note => {
    const next = change(note, bar)
    return isEqual(next, note) ? note : next
  }
  const edits = changeEvents(state, (event, span) => {
    const notes = event.notes.map(note => (anchor || note.string === cursor.string ? changed(note, span.bar) : note))
    return notes.every((note, index) => note === event.notes[index]) ? event : { ...event, notes }
  })
  return edits.length || deciding(state) ? { label, edits } : noNote(state, label)
}

/** The note that decides which way a toggle goes: the selection's first, else the one under the cursor. */
function deciding(state: EditorState): { note: Note, bar: Bar } | null {
  if (!state.selection.anchor) {
    const { note, bar } = here(state)
    return note && { note, bar }
  }
  for (const { bar, voice, from, to } of spansOf(state.score, state.selection)) {
    const note = voice.events.slice(from, to).flatMap(event => event.notes)[0]
    if (note) return { note, bar }
  }
  return null
}

/** Links the note to the next on its string; the same again unlinks it. */
export function toggleLink(state: EditorState, link: LinkKind, label: string): Transaction {
  const found = deciding(state)
  if (!found) return noNote(state, label)
  const off = found.note.link === link
  return changeNotes(state, label, note => (off ? without(note, 'link') : { ...note, link }))
}

/** Makes a note dead or whole again; where there is none, writes a dead one. */
export function toggleDead(state: EditorState, ids: IdSource): Transaction {
  const label = 'Dead note'
  const found = deciding(state)
  if (found) {
    const off = found.note.dead
    return changeNotes(state, label, note => (off ? without(note, 'dead') : { ...without(note, 'harmonic'), dead: true }))
  }
  const { bar, voice, at, event } = here(state)
  const { cursor } = state.selection
  const base = event ?? newEvent(voice, state.entry, ids)
  const next = spliced(voice, at, at + 1, [withNote(base, { id: ids.next(), string: cursor.string, fret: 0, dead: true })])
  return { label, edits: [replaceVoice(bar, cursor.voice, next)], selection: { cursor: { ...cursorAt(bar, cursor.voice, at, cursor.string), eventId: base.id }, anchor: null } }
}

/** Natural harmonic over the note's fret, or the stopped note again. */
export function toggleHarmonic(state: EditorState): Transaction {
  const label = 'Natural harmonic'
  const found = deciding(state)
  if (!found) return noNote(state, label)
  if (found.note.harmonic) {
    if (!Number.isInteger(found.note.fret)) return { label, notice: 'This harmonic is touched between frets: type the fret to stop instead.' }
    return changeNotes(state, label, note => (Number.isInteger(note.fret) ? without(note, 'harmonic') : note))
  }
  if (!PARTIAL_AT_FRET[found.note.fret]) {
    return { label, notice: `No natural harmonic sounds over fret ${found.note.fret}; 12, 7, 5, 4, 9, 3, 16, 19 and 24 have one.` }
  }
  return changeNotes(state, label, (note) => {
    const partial = PARTIAL_AT_FRET[note.fret]
    return partial ? { ...without(note, 'dead', 'spelling'), harmonic: { partial } } : note
  })
}

/** The ring rule in force for a note: its own, else its bar's, else the arrangement's. */
export const ringRuleOf = (note: Note, bar: Bar, head: Head): RingRule => note.ring ?? bar.ring ?? head.ring

/** Let ring, or end as written, whichever is not in force. A note says only what its bar does not. */
export function toggleRing(state: EditorState): Transaction {
  const label = 'Let ring'
  const { head } = state.score
  const found = deciding(state)
  if (!found) return noNote(state, label)
  const wanted: RingRule = ringRuleOf(found.note, found.bar, head) === 'written' ? 'let-ring' : 'written'
  return changeNotes(state, wanted === 'written' ? 'End as written' : label, (note, bar) => {
    if (ringRuleOf(note, bar, head) === wanted) return note
    return (bar.ring ?? head.ring) === wanted ? without(note, 'ring') : { ...note, ring: wanted }
  })
}

/** A rest in place of the event, or at the end a new one. */
export function writeRest(state: EditorState, ids: IdSource): Transaction {
  const label = 'Rest'
  const { bar, voice, at, event } = here(state)
  const { cursor, anchor } = state.selection
  if (event || anchor) return { label, edits: changeEvents(state, each => (each.notes.length || each.hidden ? { ...without(each, 'hidden'), notes: [] } : each)) }
  const rest = newEvent(voice, state.entry, ids)
  return {
    label,
    edits: [replaceVoice(bar, cursor.voice, spliced(voice, at, at, [rest]))],
    selection: { cursor: { ...cursor, barId: bar.id, eventId: rest.id }, anchor: null },
  }
}

/** Takes away the note under the cursor or all that are selected; an event's last note leaves a rest. */
export function deleteNote(state: EditorState): Transaction | null {
  const { selection } = state
  if (selection.whole) return clearBars(state)
  const { event, note } = here(state)
  if (!event && !selection.anchor) return null
  const label = 'Delete note'
  if (!selection.anchor && !note) {
    return event!.notes.length ? noNote(state, label) : { label, notice: 'This is a rest already; with Shift its place goes too.' }
  }
  const all = Boolean(selection.anchor)
  return { label, edits: changeEvents(state, each => (each.notes.length ? withNotes(each, all ? [] : each.notes.filter(other => other !== note)) : each)) }
}

function clearBars({ score, selection }: EditorState): Transaction {
  const edits = spansOf(score, selection).flatMap(({ bar, name }) => (bar.voices[name] ? [replaceVoice(bar, name, EMPTY_VOICE)] : []))
  return { label: 'Empty the bars', edits, selection: { cursor: { ...selection.cursor, eventId: END }, anchor: null } }
}

/** Takes away the event under the cursor or all that are selected, with their time; the cursor stays at the place. Whole bars go as bars. */
export function deleteEvent(state: EditorState, ids: IdSource): Transaction | null {
  const { score, selection } = state
  if (selection.whole) return removeBars(state, ids)
  const spans = spansOf(score, selection)
  const edits = spans.flatMap(({ bar, name, voice, from, to }) => (to > from ? [replaceVoice(bar, name, spliced(voice, from, to, []))] : []))
  const first = spans[0]
  if (!first || !edits.length) return null
  const left = first.voice.events[first.to]?.id ?? END
  return { label: 'Delete event', edits, selection: { cursor: { ...selection.cursor, barId: first.bar.id, eventId: left }, anchor: null } }
}

const link = (id: string, title: string, keys: readonly string[], kind: LinkKind, after: string): Command => scoreCommand({
  id: `note.${id}`, title, group: 'Techniques', keys, run: state => toggleLink(state, kind, title),
  help: 'To the next note of this string and voice, which may be written later.', example: { before: '^3/0q 3/2q', after },
})

export const noteCommands: readonly Command[] = [
  link('hammerOn', 'Hammer-on', ['h'], 'hammer-on', '^3/0hq 3/2q'),
  link('pullOff', 'Pull-off', ['p'], 'pull-off', '^3/0pq 3/2q'),
  link('tie', 'Tie', ['=', 'k'], 'tie', '^3/0=q 3/2q'),
  scoreCommand({ id: 'note.dead', title: 'Dead note', group: 'Techniques', keys: ['x'], run: toggleDead, example: { before: '^3/2q', after: '^3/2xq' } }),
  scoreCommand({
    id: 'note.harmonic', title: 'Natural harmonic', group: 'Techniques', keys: ['<', 'n'], run: toggleHarmonic,
    help: 'Touched over the fret that is written.', example: { before: '3/0q ^3/12q', after: '3/0q ^3/12<q' },
  }),
  scoreCommand({
    id: 'note.letRing', title: 'Let ring', group: 'Techniques', keys: ['l'], run: toggleRing,
    help: 'Where everything rings already: end as written.', example: { before: '^3/0q', after: '^3/0lq' },
  }),
  scoreCommand({ id: 'note.rest', title: 'Rest', group: 'Notes', keys: ['z'], run: writeRest, example: { before: '3/0q ^3:', after: '3/0q ^3:zq' } }),
  scoreCommand({ id: 'note.delete', title: 'Delete note', group: 'Notes', keys: ['Backspace', 'Delete'], run: deleteNote, help: 'The last note of an event leaves a rest.', example: { before: '^(2/1 3/0)q', after: '^2:3/0q' } }),
  scoreCommand({ id: 'note.deleteEvent', title: 'Delete event', group: 'Notes', keys: ['Shift+Backspace', 'Shift+Delete'], run: deleteEvent, help: 'Later events move up.', example: { before: '3/0q ^3/2q 3/4q', after: '3/0q ^3/4q' } }),
]
