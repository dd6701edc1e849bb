import { STRING_SPACE, tabHeight, type BarGeometry, type System } from '#shared/engraving'
import { END, type Cursor } from '#shared/editor/state'
import { at, svg } from './svg'

const COLUMN = 24
const CELL = { width: 23, height: 19 }
/** How far the column's box reaches beyond the outer strings. */
const OVERLAP = 14

const box = (x: number, y: number, width: number, height: number, name: string): SVGRectElement =>
  svg('rect', { x: at(x), y: at(y), width: at(width), height: at(height), rx: 3, class: name })

/** x of a cursor's column from its bar's left edge. */
export function columnX(geometry: BarGeometry, cursor: Pick<Cursor, 'voice' | 'eventId'>): number {
  const event = cursor.eventId === END ? undefined : geometry.events.find(each => each.eventId === cursor.eventId)
  return event?.x ?? geometry.ends[cursor.voice]
}

/** Box around the column in the tab, and around the cell of the cursor's string. `x` from the system's left edge. */
export function drawCursor(x: number, string: number, strings: number, tabTop: number): readonly SVGElement[] {
  const y = tabTop + (string - 1) * STRING_SPACE
  return [
    box(x - COLUMN / 2, tabTop - OVERLAP, COLUMN, tabHeight(strings) + 2 * OVERLAP, 'cursor-column'),
    box(x - CELL.width / 2, y - CELL.height / 2, CELL.width, CELL.height, 'cursor-cell'),
  ]
}

/** A selected stretch of a system, over staff and tab. */
export const drawSelection = (from: number, to: number, strings: number, tabTop: number): SVGElement =>
  box(from - COLUMN / 2, -OVERLAP, to - from + COLUMN, tabTop + tabHeight(strings) + 2 * OVERLAP, 'selected')

/** What sounds just now. */
export const drawPlaying = (x: number, strings: number, tabTop: number): SVGElement =>
  box(x - COLUMN / 2, -OVERLAP, COLUMN, tabTop + tabHeight(strings) + 2 * OVERLAP, 'playing')

/** Bars of a system between two places in the piece, with the x at which the stretch starts and ends; null: none. */
export function stretchIn(system: System, from: { index: number, x: number }, to: { index: number, x: number }): { from: number, to: number } | null {
  const bars = system.bars.filter(bar => bar.index >= from.index && bar.index <= to.index)
  const [first, last] = [bars[0], bars.at(-1)]
  if (!first || !last) return null
  return { from: first.index === from.index ? first.x + from.x : first.x + first.prefix + 8, to: last.index === to.index ? last.x + to.x : last.x + last.width - 12 }
}
