import { expect } from 'vitest'
import { isIntent, runCommand } from '../../shared/commands/registry'
import { applyTransaction, createIds, redoTransaction, undoTransaction, type EditorState, type IdSource } from '../../shared/editor'
import { validateScore } from '../../shared/score/validate'
import type { Head, Score } from '../../shared/score/types'
import { parseState, printState } from './score'

/** Runs a command as the desk does. Time stands still: nothing in the core depends on it. */
export function perform(state: EditorState, id: string, ids: IdSource): EditorState {
  const result = runCommand(id, state, ids)
  if (!result || isIntent(result)) return state
  return applyTransaction(state, result, 0)
}

/** Edits that touched nothing in a bar leave the very object. */
export function untouchedBarsAreIdentical(before: Score, after: Score) {
  for (const bar of after.bars) {
    const was = before.bars.find(each => each.id === bar.id)
    if (was && JSON.stringify(was) === JSON.stringify(bar)) expect(bar).toBe(was)
  }
}

/** Undo restores score and selection exactly, redo the result; both stay what JSON can carry. */
export function checkLaws(before: EditorState, after: EditorState) {
  expect(validateScore(after.score)).toBeNull()
  const step = after.history.undo.at(-1)
  const carried = { ...after, history: step ?? null }
  expect(JSON.parse(JSON.stringify(carried))).toStrictEqual(carried)
  untouchedBarsAreIdentical(before.score, after.score)
  if (after.score === before.score || !step) return
  const undone = applyTransaction(after, undoTransaction(after)!, 0)
  expect(undone.score).toEqual(parted(before, after).score)
  expect(undone.selection).toEqual(parted(before, after).selection)
  const redone = applyTransaction(undone, redoTransaction(undone)!, 0)
  expect(redone.score).toEqual(after.score)
}

/** Where a command joined the step before (12 from 1 and 2), undo goes back to before that step. */
function parted(before: EditorState, after: EditorState): EditorState {
  const merged = after.history.undo.length === before.history.undo.length && before.history.undo.length > 0
  return merged ? applyTransaction(before, undoTransaction(before)!, 0) : before
}

/**
 * A command's text before and after, and every law that holds for all of them.
 * @param first ids of commands run before it
 */
export function checkCommand(id: string, before: string, after: string, { first = [], head = {} }: { first?: readonly string[], head?: Partial<Head> } = {}): EditorState {
  const ids = createIds('new')
  const start = first.reduce((state, each) => perform(state, each, ids), parseState(before, head))
  const end = perform(start, id, ids)
  expect(printState(end)).toBe(after)
  if (!id.startsWith('history.')) checkLaws(start, end)
  return end
}
