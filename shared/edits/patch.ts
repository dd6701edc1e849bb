import { isEqual } from '../score/equal'
import { barLabel } from '../score/numbers'
import { validateBar, validateHead, validateScore } from '../score/validate'
import type { Score } from '../score/types'
import type { EditResult, PatchBar, PatchHead } from './types'
import { currentOf, patched, refuse, replaceBar } from './support'

export function applyPatchBar(score: Score, edit: PatchBar): EditResult {
  const index = score.bars.findIndex(bar => bar.id === edit.bar)
  const bar = score.bars[index]
  if (!bar) return refuse(edit, 'missing', 'That bar is not in the arrangement any more.')
  if (!isEqual(currentOf(bar, edit.after), edit.before)) return refuse(edit, 'changed', `${barLabel(score, index)} has changed meanwhile.`)
  const next = patched(bar, edit.after)
  const problem = validateBar(next, score.head)
  if (problem) return refuse(edit, 'invalid', `${barLabel(score, index)}: ${problem}`)
  return { score: replaceBar(score, index, next), inverse: { ...edit, before: edit.after, after: edit.before }, touched: [edit.bar] }
}

export function applyPatchHead(score: Score, edit: PatchHead): EditResult {
  if (!isEqual(currentOf(score.head, edit.after), edit.before)) return refuse(edit, 'changed', 'The head of the arrangement has changed meanwhile.')
  const head = patched(score.head, edit.after)
  const next = { ...score, head }
  // Other strings or frets can make notes impossible, so that the whole score is asked.
  const problem = validateHead(head) ?? (edit.after.strings || edit.after.capos || edit.after.instrument ? validateScore(next) : null)
  if (problem) return refuse(edit, 'invalid', problem)
  return { score: next, inverse: { ...edit, before: edit.after, after: edit.before }, touched: ['head'] }
}
