import type { Edit } from '../edits'
import { cursorAt, placeOf, selectedBars, spansOf, type Clip, type EditorState, type EventRun, type IdSource, type Transaction } from '../editor'
import { isFretOnNeck } from '../score/sounding'
import { VOICE_NAMES, type Bar, type Head, type ScoreEvent, type Voice, type Voices } from '../score/types'
import { replaceVoice, spliced } from './change'
import { scoreCommand, type Command } from './command'
import { keepingContexts, statedBar } from './contexts'
import { deleteEvent } from './note'

/** What a selection holds; null where it holds nothing. */
export function clipOf({ score, selection }: EditorState): Clip | null {
  if (selection.whole) {
    const bars = selectedBars(score, selection)
    return { kind: 'bars', bars: [statedBar(score, score.bars.indexOf(bars[0]!)), ...bars.slice(1)] }
  }
  const runs = spansOf(score, selection).map(({ voice, from, to }): EventRun => ({ events: voice.events.slice(from, to), tuplets: voice.tuplets ?? [] }))
  return runs.some(run => run.events.length) ? { kind: 'events', runs } : null
}

function copy(state: EditorState): Transaction | null {
  const clip = clipOf(state)
  return clip && { label: 'Copy', clip }
}

/** Copies, then takes away: whole bars where they are selected whole, else the events with their time. */
function cut(state: EditorState, ids: IdSource): Transaction | null {
  const clip = clipOf(state)
  const removal = deleteEvent(state, ids)
  return clip && removal && { ...removal, label: 'Cut', clip }
}

/** Events with ids of their own and those of their tuplets. */
function renewed({ events, tuplets = [] }: Voice, ids: IdSource): Voice {
  const used = new Set(events.flatMap(event => event.length.tuplets ?? []))
  const renamed = new Map([...used].map(id => [id, ids.next()]))
  const copied = events.map((event): ScoreEvent => ({
    ...event,
    id: ids.next(),
    length: event.length.tuplets ? { ...event.length, tuplets: event.length.tuplets.map(id => renamed.get(id)!) } : event.length,
    notes: event.notes.map(note => ({ ...note, id: ids.next() })),
  }))
  return { events: copied, tuplets: tuplets.filter(each => used.has(each.id)).map(each => ({ ...each, id: renamed.get(each.id)! })) }
}

const fits = (events: readonly ScoreEvent[], head: Head): boolean =>
  events.every(event => event.notes.every(note => note.string <= head.strings.length && isFretOnNeck(head, note.string, note.fret)))

/**
 * Pasting never loses notes: bars are put in before the cursor's bar, behind it at a voice's end; events before the cursor's event,
 * the runs of later bars at the start of the bars that follow. Bars may be overfull afterwards.
 */
export function paste(state: EditorState, ids: IdSource): Transaction | null {
  const { clip, score } = state
  if (!clip) return null
  const events = clip.kind === 'bars' ? clip.bars.flatMap(bar => VOICE_NAMES.flatMap(name => bar.voices[name]?.events ?? [])) : clip.runs.flatMap(run => run.events)
  if (!fits(events, score.head)) return { label: 'Paste', notice: 'What was copied needs strings or frets that this instrument does not have.' }
  return clip.kind === 'bars' ? pasteBars(state, clip.bars, ids) : pasteEvents(state, clip.runs, ids)
}

function pasteBars({ score, selection }: EditorState, bars: readonly Bar[], ids: IdSource): Transaction {
  const { index, event, bar: here } = placeOf(score, selection.cursor)
  const behind = !event && Object.keys(here.voices).length > 0
  const copies = bars.map((bar): Bar => {
    const voices: Voices = Object.fromEntries(Object.entries(bar.voices).map(([name, voice]) => [name, slim(renewed(voice, ids))]))
    return { ...bar, id: ids.next(), voices }
  })
  const insert: Edit = { kind: 'insertBars', after: score.bars[behind ? index : index - 1]?.id ?? null, bars: copies }
  const { voice, string } = selection.cursor
  return { label: 'Paste bars', edits: keepingContexts(score, [insert]), selection: { cursor: cursorAt(copies[0]!, voice, 0, string), anchor: null } }
}

const slim = (voice: Voice): Voice => (voice.tuplets?.length ? voice : { events: voice.events })

function pasteEvents({ score, selection }: EditorState, runs: readonly EventRun[], ids: IdSource): Transaction {
  const { cursor } = selection
  const { index, at } = placeOf(score, cursor)
  const missing = Math.max(0, index + runs.length - score.bars.length)
  const appended = Array.from({ length: missing }, (): Bar => ({ id: ids.next(), voices: {} }))
  const bars = [...score.bars, ...appended]
  let first: string | null = null
  const edits = runs.flatMap((run, offset): Edit[] => {
    const bar = bars[index + offset]!
    const voice = bar.voices[cursor.voice] ?? { events: [] }
    const place = offset === 0 ? at : 0
    const copied = renewed(run, ids)
    if (!copied.events.length) return []
    first ??= copied.events[0]!.id
    const next = outsideTuplets(voice, place)
    return [replaceVoice(bar, cursor.voice, { ...spliced(voice, next, next, copied.events), tuplets: [...voice.tuplets ?? [], ...copied.tuplets ?? []] })]
  })
  const grown: Edit[] = appended.length ? [{ kind: 'insertBars', after: score.bars.at(-1)!.id, bars: appended }] : []
  const start = first ?? cursor.eventId
  const barId = bars.find(bar => edits.some(edit => edit.kind === 'replaceVoice' && edit.bar === bar.id && edit.after?.events.some(event => event.id === start)))?.id ?? cursor.barId
  return { label: 'Paste', edits: [...grown, ...edits], selection: { cursor: { ...cursor, barId, eventId: start }, anchor: null } }
}

/** A place inside a tuplet moves to that tuplet's start, so that the tuplet stays whole. */
function outsideTuplets(voice: Voice, at: number): number {
  const outer = voice.events[at]?.length.tuplets?.[0]
  const before = voice.events[at - 1]?.length.tuplets?.[0]
  if (!outer || outer !== before) return at
  return voice.events.findIndex(event => event.length.tuplets?.[0] === outer)
}

export const clipboardCommands: readonly Command[] = [
  scoreCommand({ id: 'clipboard.copy', title: 'Copy', group: 'Selection', keys: ['Mod+c'], run: copy, example: { before: '@3/0q ^3/2q', after: '@3/0q ^3/2q' } }),
  scoreCommand({ id: 'clipboard.cut', title: 'Cut', group: 'Selection', keys: ['Mod+x'], run: cut, example: { before: '@3/0q ^3/2q 3/4q', after: '^3/4q' } }),
  scoreCommand({
    id: 'clipboard.paste', title: 'Paste', group: 'Selection', keys: ['Mod+v'], run: paste,
    help: 'Before the cursor’s event or bar, at the end behind it. Nothing that is there is lost; a bar may be overfull afterwards.',
    example: { before: '@3/0q ^3/2q', first: ['clipboard.copy', 'cursor.barEnd'], after: '3/0q 3/2q ^3/0q 3/2q' },
  }),
]
