import type { Edit, ReplaceVoice } from '../edits'
import { spansOf, type EditorState, type Span } from '../editor'
import type { Bar, Note, ScoreEvent, Voice, VoiceName } from '../score/types'

/** A voice without what means nothing: tuplets in which no event stands; null where no event is left. */
export function tidyVoice(voice: Voice): Voice | null {
  if (!voice.events.length) return null
  const used = new Set(voice.events.flatMap(event => event.length.tuplets ?? []))
  const tuplets = (voice.tuplets ?? []).filter(tuplet => used.has(tuplet.id))
  return tuplets.length ? { events: voice.events, tuplets } : { events: voice.events }
}

/** The edit by which a bar's voice becomes this one. */
export const replaceVoice = (bar: Bar, name: VoiceName, voice: Voice): ReplaceVoice =>
  ({ kind: 'replaceVoice', bar: bar.id, voice: name, before: bar.voices[name] ?? null, after: tidyVoice(voice) })

/** The voice with the events from `from` to `to` replaced. */
export const spliced = (voice: Voice, from: number, to: number, events: readonly ScoreEvent[]): Voice =>
  ({ ...voice, events: [...voice.events.slice(0, from), ...events, ...voice.events.slice(to)] })

/** Edits by which `change` comes over every selected event; voices in which nothing changed are left out. */
export function changeEvents(state: EditorState, change: (event: ScoreEvent, span: Span) => ScoreEvent): readonly Edit[] {
  return spansOf(state.score, state.selection).flatMap((span) => {
    const before = span.voice.events.slice(span.from, span.to)
    const after = before.map(event => change(event, span))
    return after.every((event, index) => event === before[index]) ? [] : [replaceVoice(span.bar, span.name, spliced(span.voice, span.from, span.to, after))]
  })
}

/** The event with these notes, from string 1 to the lowest; a sounding event is not hidden. */
export function withNotes(event: ScoreEvent, notes: readonly Note[]): ScoreEvent {
  const { hidden, ...rest } = event
  const ordered = notes.toSorted((a, b) => a.string - b.string)
  return hidden && !notes.length ? { ...event, notes } : { ...rest, notes: ordered }
}

export const withNote = (event: ScoreEvent, note: Note): ScoreEvent =>
  withNotes(event, [...event.notes.filter(each => each.string !== note.string), note])

/** The object without some of its optional fields. */
export function without<T extends object, K extends keyof T>(value: T, ...fields: readonly K[]): T {
  const copy = { ...value }
  for (const field of fields) Reflect.deleteProperty(copy, field)
  return copy
}
