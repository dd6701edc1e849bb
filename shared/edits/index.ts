import type { Score } from '../score/types'
import { applyInsertBars, applyMoveBars, applyRemoveBars } from './bars'
import { applyPatchBar, applyPatchHead } from './patch'
import { isRefused, type Edit, type EditResult, type Refusal } from './types'
import { applyReplaceVoice } from './voice'

export * from './types'

/** Applies one edit, or says why it can't be. The score given is never changed; untouched bars keep their identity. */
export function applyEdit(score: Score, edit: Edit): EditResult {
  switch (edit.kind) {
    case 'replaceVoice': return applyReplaceVoice(score, edit)
    case 'patchBar': return applyPatchBar(score, edit)
    case 'patchHead': return applyPatchHead(score, edit)
    case 'insertBars': return applyInsertBars(score, edit)
    case 'removeBars': return applyRemoveBars(score, edit)
    case 'moveBars': return applyMoveBars(score, edit)
  }
}

export interface AppliedAll { readonly score: Score, readonly inverses: readonly Edit[], readonly touched: ReadonlySet<string> }

/** Applies edits in order, all or none. `inverses` are in the order in which they undo. */
export function applyEdits(score: Score, edits: readonly Edit[]): AppliedAll | { readonly refused: Refusal } {
  const inverses: Edit[] = []
  const touched = new Set<string>()
  let current = score
  for (const edit of edits) {
    const result = applyEdit(current, edit)
    if (isRefused(result)) return result
    current = result.score
    inverses.push(result.inverse)
    for (const id of result.touched) touched.add(id)
  }
  return { score: current, inverses: inverses.reverse(), touched }
}
