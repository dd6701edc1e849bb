import { STRING_SPACE, cellAt, geometryOf, notationAt, yOfPosition, type BarGeometry } from '#shared/engraving'
import type { Cursor } from '#shared/editor/state'
import type { Score } from '#shared/score/types'
import type { DrawnBar } from './bar'
import { columnX } from './overlay'
import type { SystemView } from './systemView'

/** Which bar stands where: from a cursor to its place on the sheet, and from a point to its cell. */
export class Layout {
  score: Score | null = null
  views: SystemView[] = []
  indexOf = new Map<string, number>()
  /** Drawings of bars by id. */
  readonly bars = new Map<string, DrawnBar>()

  /** The cell under a point of the window. @param voice whose events are meant where both voices stand */
  cellAtPoint(clientX: number, clientY: number, current: Cursor | null): Cursor | null {
    const view = this.views[this.viewIndexAtY(clientY)]
    if (!view || !this.score) return null
    const { x, y } = view.local(clientX, clientY)
    const placed = view.system.bars.find(bar => x < bar.x + bar.width) ?? view.system.bars.at(-1)!
    const bar = this.score.bars[placed.index]!
    const geometry = this.geometry(placed.index)
    const notation = notationAt(this.score, placed.index)
    const strings = this.score.head.strings.length
    const inTab = y > view.tabTop - STRING_SPACE * 1.5
    const pointed = Math.min(strings, Math.max(1, Math.round((y - view.tabTop) / STRING_SPACE) + 1))
    const nearest = (voice: Cursor['voice']) => cellAt(geometry, voice, x - placed.x)
    const voice = current?.voice ?? 'upper'
    const eventId = nearest(voice)
    const noteOf = (id: string, string: number) => notation.events.find(each => each.eventId === id)?.notes.find(note => note.string === string)
    if (!inTab) {
      const notes = notation.events.find(each => each.eventId === eventId)?.notes ?? []
      const note = [...notes].sort((a, b) => Math.abs(yOfPosition(a.position) - y) - Math.abs(yOfPosition(b.position) - y))[0]
      return { barId: bar.id, voice, eventId, string: note?.string ?? current?.string ?? 1 }
    }
    // A number of another voice under the pointer is what was meant.
    const other = noteOf(eventId, pointed)
      ? undefined
      : notation.tab.find(mark => mark.string === pointed && mark.voice !== voice && Math.abs(geometry.columns[mark.slice]! + 6 - (x - placed.x)) < 12)
    return other ? { barId: bar.id, voice: other.voice, eventId: other.eventId, string: pointed } : { barId: bar.id, voice, eventId, string: pointed }
  }

  /** The cell above or below a cursor's, one system on; null at the first and last. */
  systemNeighbour(cursor: Cursor, direction: 1 | -1): Cursor | null {
    const here = this.placeOf(cursor)
    const view = here && this.views[here.system + direction]
    if (!here || !view || !this.score) return null
    const placed = view.system.bars.find(bar => here.x < bar.x + bar.width) ?? view.system.bars.at(-1)!
    return { ...cursor, barId: this.score.bars[placed.index]!.id, eventId: cellAt(this.geometry(placed.index), cursor.voice, here.x - placed.x) }
  }

  placeOf(cursor: Pick<Cursor, 'barId' | 'voice' | 'eventId'>): { system: number, index: number, x: number, inBar: number } | null {
    const index = this.indexOf.get(cursor.barId)
    if (index === undefined) return null
    const system = this.systemOf(index)
    const placed = this.views[system]?.system.bars.find(bar => bar.index === index)
    if (!placed) return null
    const inBar = columnX(this.geometry(index), cursor)
    return { system, index, x: placed.x + inBar, inBar }
  }

  geometry(index: number): BarGeometry {
    const placed = this.views[this.systemOf(index)]!.system.bars.find(bar => bar.index === index)!
    const notation = notationAt(this.score!, index)
    const drawn = this.bars.get(this.score!.bars[index]!.id)
    return drawn?.notation === notation && drawn.width === placed.width && drawn.prefix === placed.prefix ? drawn.geometry : geometryOf(notation, placed.prefix, placed.width)
  }

  /** Have columns come to the bar at `index` for which its width is too small? */
  isCrampedSince(before: Score, index: number): boolean {
    const notation = notationAt(this.score!, index)
    if (notation.slices.length <= notationAt(before, index).slices.length) return false
    const placed = this.views[this.systemOf(index)]!.system.bars.find(bar => bar.index === index)!
    return placed.width - placed.prefix < notation.least
  }

  /** Position of the system that holds the bar at `index`. */
  systemOf(index: number): number {
    let [low, high] = [0, this.views.length - 1]
    while (low < high) {
      const middle = (low + high) >> 1
      if (this.views[middle]!.system.bars.at(-1)!.index < index) low = middle + 1
      else high = middle
    }
    return low
  }

  /** Position of the first system that reaches below a height of the window. */
  viewIndexAtY(clientY: number): number {
    let [low, high] = [0, this.views.length - 1]
    while (low < high) {
      const middle = (low + high) >> 1
      if (this.views[middle]!.clientBox().bottom < clientY) low = middle + 1
      else high = middle
    }
    return low
  }
}
