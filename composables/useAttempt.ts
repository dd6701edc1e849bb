import { applyEdits, isRefused } from '#shared/edits'
import type { Transaction } from '#shared/editor'
import { useEditorStore } from '~/stores/editor'

/** For dialogs: does what was asked for, or answers with the sentence that says why it can't be, and changes nothing. */
export function useAttempt(): (transaction: Transaction | null) => string | null {
  const editor = useEditorStore()
  return (transaction) => {
    if (!transaction || !editor.state) return null
    const applied = applyEdits(editor.state.score, transaction.edits ?? [])
    if (isRefused(applied)) return applied.refused.message
    editor.dispatch(transaction)
    return null
  }
}
