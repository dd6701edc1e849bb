import type { Transaction } from '#shared/editor'
import { takeMine, type Conflict } from '#shared/editor/rebase'
import type { Score } from '#shared/score/types'

/** My reading of a place that someone else changed too. Theirs stands in the score until a person has chosen. */
export interface Reading {
  readonly id: string
  readonly conflict: Conflict
}

/** @param rebase names this rebase among all of the device */
export const readingsOf = (conflicts: readonly Conflict[], rebase: string): readonly Reading[] =>
  conflicts.map((conflict, index) => ({ id: `${rebase}-${index}`, conflict }))

/** Puts my reading in place of theirs; null where there is nothing to put. */
export function chosenTransaction(score: Score, { conflict }: Reading): Transaction | null {
  const edits = takeMine(score, conflict)
  return edits?.length ? { label: 'Take my reading', edits } : null
}
