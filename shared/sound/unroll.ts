import type { Bar } from '../score/types'

/**
 * Positions of bars in the order in which they are played. A repeat goes back to the nearest repeat start before it, else to
 * the bar behind the repeat before, else to the beginning (common practice).
 */
export function unroll(bars: readonly Bar[]): readonly number[] {
  const order: number[] = []
  let start = 0
  bars.forEach((bar, index) => {
    if (bar.repeatStart) start = index
    order.push(index)
    if (!bar.repeatEnd) return
    const passage = Array.from({ length: index - start + 1 }, (_, step) => start + step)
    for (let time = 1; time < bar.repeatEnd; time++) order.push(...passage)
    start = index + 1
  })
  return order
}
