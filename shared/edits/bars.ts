import { isEqual } from '../score/equal'
import { validateBar } from '../score/validate'
import type { Score } from '../score/types'
import type { EditResult, InsertBars, MoveBars, RemoveBars } from './types'
import { positionAfter, refuse } from './support'

export function applyInsertBars(score: Score, edit: InsertBars): EditResult {
  const at = positionAfter(score.bars, edit.after)
  if (at < 0) return refuse(edit, 'missing', 'The bar before that place is not in the arrangement any more.')
  const known = new Set(score.bars.map(bar => bar.id))
  if (edit.bars.some(bar => known.has(bar.id) || !known.add(bar.id))) return refuse(edit, 'invalid', 'A bar with that id is there already.')
  const problem = edit.bars.map(bar => validateBar(bar, score.head)).find(each => each !== null)
  if (problem) return refuse(edit, 'invalid', problem)
  return {
    score: { ...score, bars: [...score.bars.slice(0, at), ...edit.bars, ...score.bars.slice(at)] },
    inverse: { kind: 'removeBars', after: edit.after, bars: edit.bars },
    touched: edit.bars.map(bar => bar.id),
  }
}

export function applyRemoveBars(score: Score, edit: RemoveBars): EditResult {
  const at = positionAfter(score.bars, edit.after)
  if (at < 0) return refuse(edit, 'missing', 'The bar before that place is not in the arrangement any more.')
  const there = score.bars.slice(at, at + edit.bars.length)
  if (!isEqual(there, edit.bars)) return refuse(edit, 'changed', 'The bars to remove have changed meanwhile.')
  if (there.length === score.bars.length) return refuse(edit, 'invalid', 'An arrangement keeps at least one bar.')
  return {
    score: { ...score, bars: [...score.bars.slice(0, at), ...score.bars.slice(at + there.length)] },
    inverse: { kind: 'insertBars', after: edit.after, bars: edit.bars },
    touched: edit.bars.map(bar => bar.id),
  }
}

export function applyMoveBars(score: Score, edit: MoveBars): EditResult {
  const at = positionAfter(score.bars, edit.from)
  if (at < 0) return refuse(edit, 'missing', 'The bar before that place is not in the arrangement any more.')
  const moving = score.bars.slice(at, at + edit.bars.length)
  if (!isEqual(moving.map(bar => bar.id), edit.bars)) return refuse(edit, 'changed', 'The bars to move stand elsewhere by now.')
  const rest = [...score.bars.slice(0, at), ...score.bars.slice(at + moving.length)]
  const to = positionAfter(rest, edit.to)
  if (to < 0) return refuse(edit, 'missing', 'The bar to move them behind is not in the arrangement any more.')
  return {
    score: { ...score, bars: [...rest.slice(0, to), ...moving, ...rest.slice(to)] },
    inverse: { ...edit, from: edit.to, to: edit.from },
    touched: edit.bars,
  }
}
