import { applyEdits, isRefused, type Edit } from '../edits'
import type { EditorState, History, HistoryEntry, Selection } from './state'

/** What a command asks for: edits, and how the editor stands afterwards. Fields left out stay as they are. */
export interface Transaction {
  /** As the undo entry reads: "Enter fret 12". */
  readonly label: string
  readonly edits?: readonly Edit[]
  readonly selection?: Selection
  readonly entry?: EditorState['entry']
  /** Left out: a fret being typed is finished. */
  readonly typed?: EditorState['typed']
  readonly notice?: string
  readonly clip?: EditorState['clip']
  /**
   * record: an undo step of its own (the default where there are edits). merge: joins the step before.
   * undo, redo: made by history itself. skip: not to be undone (what came from someone else).
   */
  readonly history?: 'record' | 'merge' | 'undo' | 'redo' | 'skip'
}

/**
 * Applies a transaction. Refused edits change nothing but the notice, which says why; a step of history that is refused, since
 * someone else changed its place, is let go, so that it does not stand before the others. Commands never sleep or read a clock:
 * `time` in ms is given.
 */
export function applyTransaction(state: EditorState, transaction: Transaction, time: number): EditorState {
  const edits = transaction.edits ?? []
  const applied = applyEdits(state.score, edits)
  if (isRefused(applied)) return { ...state, typed: null, ...refused(state.history, transaction, applied.refused.message) }
  return {
    score: edits.length ? applied.score : state.score,
    selection: transaction.selection ?? state.selection,
    entry: transaction.entry ?? state.entry,
    typed: transaction.typed ?? null,
    clip: transaction.clip ?? state.clip,
    notice: transaction.notice ?? null,
    history: edits.length ? remember(state, transaction, { label: transaction.label, edits: applied.inverses, selection: state.selection, time }) : state.history,
  }
}

function refused(history: History, { history: kind }: Transaction, message: string): Pick<EditorState, 'history' | 'notice'> {
  if (kind === 'undo') return { history: { ...history, undo: history.undo.slice(0, -1) }, notice: `${message} This step can’t be undone any more.` }
  if (kind === 'redo') return { history: { ...history, redo: history.redo.slice(0, -1) }, notice: `${message} This step can’t be done again any more.` }
  return { history, notice: message }
}

function remember(state: EditorState, transaction: Transaction, entry: HistoryEntry): History {
  const { undo, redo } = state.history
  const last = undo.at(-1)
  switch (transaction.history ?? 'record') {
    case 'skip': return state.history
    case 'undo': return { undo: undo.slice(0, -1), redo: [...redo, entry] }
    case 'redo': return { undo: [...undo, entry], redo: redo.slice(0, -1) }
    case 'merge': if (last) return { undo: [...undo.slice(0, -1), { ...last, edits: [...entry.edits, ...last.edits] }], redo: [] }
    // falls through: there is nothing to join
    case 'record': return { undo: [...undo, entry], redo: [] }
  }
}

/** The transaction that takes the last step back; null when there is none. */
export function undoTransaction(state: EditorState): Transaction | null {
  const entry = state.history.undo.at(-1)
  return entry ? { label: `Undo ${entry.label}`, edits: entry.edits, selection: entry.selection, history: 'undo' } : null
}

/** The transaction that does the step last undone again; null when there is none. */
export function redoTransaction(state: EditorState): Transaction | null {
  const entry = state.history.redo.at(-1)
  return entry ? { label: `Redo ${entry.label}`, edits: entry.edits, selection: entry.selection, history: 'redo' } : null
}
