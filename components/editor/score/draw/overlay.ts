import { STRING_SPACE, tabHeight, type BarGeometry, type System } from '#shared/engraving'
import { END, type Cursor } from '#shared/editor/state'
import { at, svg } from './svg'

const COLUMN = 22
const CELL = { width: 22, height: 19 }
/** How far the column's box reaches beyond the outer strings. */
const OVERLAP = 14

const box = (x: number, y: number, width: number, height: number, name: string): SVGRectElement =>
  svg('rect', { x: at(x), y: at(y), width: at(width), height: at(height), rx: 3, class: name })

/** x of a cursor's column from its bar's left edge. */
export function columnX(geometry: BarGeometry, cursor: Pick<Cursor, 'voice' | 'eventId'>): number {
  const event = cursor.eventId === END ? undefined : geometry.events.find(each => each.eventId === cursor.eventId)
  return event?.x ?? geometry.ends[cursor.voice]
}

/** Box around the column in the tab, and around the cell of the cursor's string; its nodes are moved, never made anew. */
export class CursorBox {
  private readonly column = box(0, 0, COLUMN, 0, 'cursor-column')
  private readonly cell = box(0, 0, CELL.width, CELL.height, 'cursor-cell')
  private readonly group = svg('g', {}, this.column, this.cell)
  private stood = ''

  /** @param x from the system's left edge */
  place(layer: SVGGElement, x: number, string: number, strings: number, tabTop: number): void {
    const height = tabHeight(strings) + 2 * OVERLAP
    if (this.group.parentNode !== layer) layer.append(this.group)
    const column = `translate(${at(x - COLUMN / 2)} ${at(tabTop - OVERLAP)})`
    if (this.stood !== `${column} ${height}`) {
      this.group.setAttribute('transform', column)
      this.column.setAttribute('height', `${height}`)
      this.stood = `${column} ${height}`
    }
    this.cell.setAttribute('y', `${at(OVERLAP + (string - 1) * STRING_SPACE - CELL.height / 2)}`)
  }

  hide(): void {
    this.group.remove()
  }
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
