import { contextsDrawAlike, isSameRole, type System } from '#shared/engraving'
import type { Bar, Score } from '#shared/score/types'

/** Positions of the bars that differ in their voices only; null where the score has another shape, look or context. */
export function changedBars(before: Score, after: Score): readonly number[] | null {
  if (before.bars.length !== after.bars.length || !contextsDrawAlike(before, after)) return null
  const changed: number[] = []
  for (let index = 0; index < after.bars.length; index++) {
    const [old, now] = [before.bars[index]!, after.bars[index]!]
    if (old === now) continue
    if (!isSameFrame(old, now)) return null
    changed.push(index)
  }
  return changed
}

const isSameFrame = (a: Bar, b: Bar): boolean =>
  a.id === b.id && a.meter === b.meter && a.key === b.key && a.tempo === b.tempo && a.length === b.length
  && a.repeatStart === b.repeatStart && a.repeatEnd === b.repeatEnd && a.ring === b.ring

/** Bars were added at the end, and none moved. */
export const isAppended = (before: Score, after: Score): boolean =>
  after.bars.length > before.bars.length && before.bars.every((bar, index) => after.bars[index]!.id === bar.id)

/** The same bars in the same places: nothing of the system's frame moves. */
export const isSameSystem = (a: System, b: System): boolean =>
  a === b || (a.top === b.top && a.bottom === b.bottom && a.width === b.width && a.bars.length === b.bars.length
    && a.bars.every((bar, at) => {
      const other = b.bars[at]!
      return bar.index === other.index && bar.x === other.x && bar.width === other.width && bar.prefix === other.prefix && isSameRole(bar.role, other.role)
    }))
