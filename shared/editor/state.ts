import type { Bar, Length, Score, ScoreEvent, Tuplet, VoiceName } from '../score/types'
import type { Edit } from '../edits'

/** Where the next key acts: a string of an event, or the open end of a voice. Never an offset. */
export interface Cursor {
  readonly barId: string
  readonly voice: VoiceName
  /** An event's id, or 'end': behind the voice's last event, where the next one will be. */
  readonly eventId: string
  readonly string: number
}

export const END = 'end'

/** The cursor, and where the selection began; without an anchor only the cursor's cell is meant. */
export interface Selection {
  readonly cursor: Cursor
  readonly anchor: Cursor | null
  /** The bars from anchor to cursor are meant whole, with all their voices. */
  readonly whole?: true
}

/** Events of one voice in one bar, as copied. */
export interface EventRun { readonly events: readonly ScoreEvent[], readonly tuplets: readonly Tuplet[] }

/** What was cut or copied: whole bars (the first states its meter, key and tempo), or one run of events for each bar they came from. */
export type Clip = { readonly kind: 'bars', readonly bars: readonly Bar[] } | { readonly kind: 'events', readonly runs: readonly EventRun[] }

/** What is remembered of a fret being typed, so that 1 then 2 is 12. Any other act clears it. `recorded`: its first digit changed something. */
export interface TypedFret { readonly noteId: string, readonly digits: string, readonly recorded: boolean }

export interface HistoryEntry {
  readonly label: string
  /** In the order in which they undo (or redo). */
  readonly edits: readonly Edit[]
  /** Selection to return to. */
  readonly selection: Selection
  /** Milliseconds; stamped by dispatch. */
  readonly time: number
}

export interface History {
  readonly undo: readonly HistoryEntry[]
  readonly redo: readonly HistoryEntry[]
}

export interface EditorState {
  readonly score: Score
  readonly selection: Selection
  /** Written length of what is entered next. */
  readonly entry: Pick<Length, 'base' | 'dots'>
  readonly typed: TypedFret | null
  readonly history: History
  readonly clip: Clip | null
  /** One sentence for the status line: why the last key did nothing, or what to know of it. */
  readonly notice: string | null
}

/** Opens a score with the cursor on the first event of its first bar's upper voice, on string 1.
 * @throws RangeError when the score has no bar. */
export function openEditor(score: Score): EditorState {
  const bar = score.bars[0]
  if (!bar) throw new RangeError('a score has at least one bar')
  const first = bar.voices.upper?.events[0]
  return {
    score,
    selection: { cursor: { barId: bar.id, voice: 'upper', eventId: first?.id ?? END, string: 1 }, anchor: null },
    entry: { base: 4, dots: 0 },
    typed: null,
    history: { undo: [], redo: [] },
    clip: null,
    notice: null,
  }
}
