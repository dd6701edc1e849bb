import type { Bar, Score } from '../score/types'
import type { Edit, EditResult, RefusalReason } from './types'

export const refuse = (edit: Edit, reason: RefusalReason, message: string): EditResult => ({ refused: { reason, message, edit } })

/** The score with the bar at `index` replaced; every other bar keeps its identity. */
export function replaceBar(score: Score, index: number, bar: Bar): Score {
  const bars = score.bars.slice()
  bars[index] = bar
  return { ...score, bars }
}

/** Position just behind the bar with this id (null: the start); −1 when there is no such bar. */
export function positionAfter(bars: readonly Bar[], id: string | null): number {
  if (id === null) return 0
  const index = bars.findIndex(bar => bar.id === id)
  return index < 0 ? -1 : index + 1
}

/** The values that `patch` names, as they stand in `target`; absent reads as null. */
export function currentOf<T extends object>(target: T, patch: object): Record<string, unknown> {
  return Object.fromEntries(Object.keys(patch).map(field => [field, (target as Record<string, unknown>)[field] ?? null]))
}

/** `target` with the fields of `patch`; null takes a field away. */
export function patched<T extends object>(target: T, patch: object): T {
  const result = { ...target } as Record<string, unknown>
  for (const [field, value] of Object.entries(patch)) {
    if (value === null) Reflect.deleteProperty(result, field)
    else result[field] = value
  }
  return result as T
}
