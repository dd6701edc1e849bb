import { applyEdits, isRefused, type BarPatch, type Edit } from '../edits'
import { contextsOf, DEFAULT_KEY, DEFAULT_METER, DEFAULT_TEMPO } from '../score/context'
import { isEqual } from '../score/equal'
import type { Bar, Score } from '../score/types'

type Stated = Pick<Bar, 'meter' | 'key' | 'tempo'>
const FIELDS = ['meter', 'key', 'tempo'] as const

/** What a bar says once its bar before is gone: its meter, key and tempo in full. */
export function statedBar(score: Score, index: number): Bar {
  const { meter, key, tempo } = contextsOf(score)[index]!
  return { ...score.bars[index]!, meter, key, tempo }
}

/**
 * Structural edits with what keeps every bar in its meter, key and tempo: a bar whose predecessor no longer says them states them
 * itself, and one that would repeat what now holds anyway stops doing so when it stood first.
 * @param edits insert, remove or move bars. @throws RangeError when they can't be applied
 */
export function keepingContexts(score: Score, edits: readonly Edit[]): readonly Edit[] {
  const applied = applyEdits(score, edits)
  if (isRefused(applied)) throw new RangeError(applied.refused.message)
  const contexts = contextsOf(score)
  const wanted = new Map<string, Required<Stated>>(score.bars.map((bar, index) => [bar.id, contexts[index]!]))
  let current: Required<Stated> = { meter: DEFAULT_METER, key: DEFAULT_KEY, tempo: DEFAULT_TEMPO }
  const opening = score.bars[0]!.id
  const patches = applied.score.bars.flatMap((bar, index): Edit[] => {
    const wish = wanted.get(bar.id) ?? { ...current, ...pickStated(bar) }
    const states = (field: typeof FIELDS[number]): boolean =>
      index === 0
        ? bar[field] !== undefined || !isEqual(wish[field], current[field])
        : !isEqual(wish[field], current[field]) || (bar[field] !== undefined && bar.id !== opening && wanted.has(bar.id))
    const before: Record<string, unknown> = {}
    const after: Record<string, unknown> = {}
    for (const field of FIELDS) {
      const value = states(field) ? wish[field] : null
      if (isEqual(value, bar[field] ?? null)) continue
      before[field] = bar[field] ?? null
      after[field] = value
    }
    current = wish
    return Object.keys(after).length ? [{ kind: 'patchBar', bar: bar.id, before: before as BarPatch, after: after as BarPatch }] : []
  })
  return [...edits, ...patches]
}

const pickStated = (bar: Bar): Stated => Object.fromEntries(FIELDS.filter(field => bar[field]).map(field => [field, bar[field]]))
