import { defineStore } from 'pinia'
import { computed, shallowRef } from 'vue'
import { isIntent, runCommand, type Intent } from '#shared/commands/registry'
import { applyTransaction, createIds, openEditor, sessionPrefix, settleSelection, type EditorState, type Transaction } from '#shared/editor'
import { deepFreeze } from '#shared/score/freeze'
import type { Score } from '#shared/score/types'

export interface EditorListener {
  /** Called at once, in the same task as the key. */
  readonly changed?: (after: EditorState, before: EditorState, transaction: Transaction) => void
  readonly intent?: (intent: Intent) => void
}

/**
 * The arrangement on the desk. Its state is one immutable value, replaced by `dispatch`; never `$subscribe` to this store, as that
 * watches the whole value in depth.
 */
export const useEditorStore = defineStore('editor', () => {
  const state = shallowRef<EditorState | null>(null)
  const score = computed(() => state.value?.score ?? null)
  const selection = computed(() => state.value?.selection ?? null)
  const listeners = new Set<EditorListener>()
  const ids = createIds(sessionPrefix(size => crypto.getRandomValues(new Uint8Array(size))))

  function set(next: EditorState): void {
    state.value = import.meta.dev ? deepFreeze(next) : next
  }

  function open(opened: Score): void {
    set(openEditor(opened))
  }

  function close(): void {
    state.value = null
  }

  function dispatch(transaction: Transaction): void {
    const before = state.value
    if (!before) return
    const after = applyTransaction(before, transaction, Date.now())
    set(after)
    for (const listener of listeners) listener.changed?.(after, before, transaction)
  }

  /** Runs a command by name. A command that has nothing to do here does nothing. */
  function run(id: string): void {
    const result = state.value && runCommand(id, state.value, ids)
    if (!result) return
    if (!isIntent(result)) return dispatch(result)
    for (const listener of listeners) listener.intent?.(result)
  }

  /** Puts a score in place that others have changed; cursor and selection stay where their events still are. */
  function replaceScore(replaced: Score, notice: string | null = null): void {
    const before = state.value
    if (before) set({ ...before, score: replaced, selection: settleSelection(replaced, before.selection), typed: null, notice })
  }

  /** Says one sentence in the status line. */
  function say(notice: string): void {
    if (state.value) set({ ...state.value, notice })
  }

  /** @returns takes the listener away */
  function listen(listener: EditorListener): () => void {
    listeners.add(listener)
    return () => void listeners.delete(listener)
  }

  return { state, score, selection, ids, open, close, dispatch, run, replaceScore, say, listen }
})
