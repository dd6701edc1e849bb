import { carriedKey, carriedOut, fillSystem, layOut, notationAt, type System } from '#shared/engraving'
import { END, type Cursor, type Selection } from '#shared/editor/state'
import type { Score } from '#shared/score/types'
import { changedBars, isAppended } from './changes'
import type { LaneLine } from './lanes'
import { Layout } from './layout'
import { CursorBox, drawPlaying, drawSelection, stretchIn } from './overlay'
import { createPen, type Pen } from './staff'
import { SystemView } from './systemView'
import type { Vex } from './library'

export interface Playing { readonly barId: string, readonly eventIds: readonly string[] }
export type LanesOf = (score: Score, index: number) => readonly LaneLine[]

/** A pause in typing after which systems are broken and justified anew, in ms. */
const SETTLE = 600
/** Systems this far outside the window are drawn beforehand, in CSS pixels. */
const NEAR = 700

/**
 * The drawn score. It owns its nodes and changes only what changed: a keystroke draws the bar it edits, moving the cursor
 * draws no bar, and what lies outside the window is drawn when it comes near.
 */
export class Sheet {
  private readonly layout = new Layout()
  private selection: Selection | null = null
  private playing: Playing | null = null
  private readonly cursorBox = new CursorBox()
  private readonly highlights: SVGElement[] = []
  private width = 0
  private scale = 1
  private settling: ReturnType<typeof setTimeout> | undefined
  private ringing = 0
  private readonly pen: Pen
  private looking = 0

  constructor(private readonly root: HTMLElement, vex: Vex, private lanesOf: LanesOf | null) {
    this.pen = createPen(vex)
    // Whatever scrolls, the sheet may move with it. An observer of every system would cost each frame of a long piece.
    document.addEventListener('scroll', this.lookLater, { capture: true, passive: true })
    window.addEventListener('resize', this.lookLater)
  }

  /**
   * Shows a score with its cursor; draws the bars that differ from the one shown before. The system settles a moment after the
   * last key, or at once where notes that came would run into each other.
   */
  show(score: Score, selection: Selection | null): void {
    const before = this.layout.score
    this.layout.score = score
    this.selection = selection
    if (!before || !this.width) return this.rebuild()
    if (before === score) return this.drawOverlay()
    const changed = changedBars(before, score)
    if (changed) this.redraw(before, score, changed)
    else if (!this.append(before, score)) this.rebuild()
    if (changed?.some(index => this.layout.isCrampedSince(before, index))) this.settle()
    else this.settleLater()
    this.drawOverlay()
  }

  /** @param width of the place for the sheet, in CSS pixels; narrow places get a smaller drawing */
  resize(width: number): void {
    const scale = width < 480 ? 0.82 : width < 760 ? 0.92 : 1
    if (Math.abs(width - this.width) < 1 && scale === this.scale) return
    this.width = width
    this.scale = scale
    this.rebuild(true)
  }

  showPlaying(playing: Playing | null): void {
    this.playing = playing
    this.drawOverlay()
  }

  showLanes(lanesOf: LanesOf | null): void {
    this.lanesOf = lanesOf
    this.rebuild(true)
  }

  /** Draws what is not drawn yet, for print. */
  drawAll(): void {
    if (this.settling) this.settle()
    for (const view of this.layout.views) if (!view.isDrawn && this.layout.score) view.draw(this.layout.score)
  }

  destroy(): void {
    clearTimeout(this.settling)
    cancelAnimationFrame(this.ringing)
    this.layout.score = null
    cancelAnimationFrame(this.looking)
    document.removeEventListener('scroll', this.lookLater, { capture: true })
    window.removeEventListener('resize', this.lookLater)
    this.root.replaceChildren()
  }

  /** The cell under a point of the window. @param current whose voice is meant where both stand */
  cellAtPoint(clientX: number, clientY: number, current: Cursor | null): Cursor | null {
    return this.layout.cellAtPoint(clientX, clientY, current)
  }

  /** The cell above or below a cursor's, one system on; null at the first and last. */
  systemNeighbour(cursor: Cursor, direction: 1 | -1): Cursor | null {
    return this.layout.systemNeighbour(cursor, direction)
  }

  /** Brings the cursor's system into the window, and of a system higher than the window the cursor's cell. */
  scrollToCursor(behavior: ScrollBehavior = 'auto'): void {
    const here = this.selection && this.layout.placeOf(this.selection.cursor)
    const element = here && this.layout.views[here.system]?.element
    if (!element) return
    element.scrollIntoView({ block: 'nearest', behavior })
    element.querySelector('.cursor-cell')?.scrollIntoView({ block: 'nearest', behavior })
  }

  /** Width for the systems in points; the bracket stands left of it. */
  private get lineWidth(): number {
    return Math.max(140, this.width / this.scale - 12)
  }

  private redraw(before: Score, score: Score, changed: readonly number[]): void {
    const touched = new Set<number>()
    for (const index of changed) {
      touched.add(index)
      const handsOn = carriedKey(carriedOut(before.bars[index])) !== carriedKey(carriedOut(score.bars[index]))
      if (handsOn && index + 1 < score.bars.length) touched.add(index + 1)
    }
    const bySystem = new Map<number, number[]>()
    for (const index of touched) {
      const system = this.layout.systemOf(index)
      const position = this.layout.views[system]!.system.bars.findIndex(bar => bar.index === index)
      bySystem.set(system, [...(bySystem.get(system) ?? []), position])
    }
    // A link across a system's end is drawn in both.
    for (const index of touched) {
      const system = this.layout.systemOf(index - 1)
      if (index > 0 && !bySystem.has(system)) bySystem.set(system, [])
    }
    for (const [system, positions] of bySystem) this.layout.views[system]!.redraw(score, positions)
    this.ringLater(Math.min(...bySystem.keys()), Math.max(...bySystem.keys()))
  }

  /** How long the notes ring, here and over into the systems that follow, shows just after the frame that shows the change. */
  private ringLater(first: number, last: number): void {
    cancelAnimationFrame(this.ringing)
    this.ringing = requestAnimationFrame(() => setTimeout(() => {
      if (this.layout.score) for (const view of this.layout.views.slice(first, last + 3)) view.drawLanes(this.layout.score)
    }))
  }

  /** Bars added at the end join the last system, or begin one, and leave the others where they are. */
  private append(before: Score, score: Score): boolean {
    const last = this.layout.views.at(-1)
    if (!last || !isAppended(before, score)) return false
    score.bars.slice(before.bars.length).forEach((bar, offset) => this.layout.indexOf.set(bar.id, before.bars.length + offset))
    const from = last.system.bars[0]!.index
    const joined = fillSystem(score, from, score.bars.length, this.lineWidth)
    const isLoose = joined.bars.every(bar => bar.width >= notationAt(score, bar.index).least + bar.prefix) && joined.bars.length <= 6
    const changed = changedBars(before, { ...score, bars: score.bars.slice(0, before.bars.length) })
    if (!changed) return false
    if (isLoose) last.setSystem(joined, score)
    else {
      last.setSystem(fillSystem(score, from, before.bars.length, this.lineWidth), score)
      this.layout.views.push(this.addView(fillSystem(score, before.bars.length, score.bars.length, this.lineWidth), score))
    }
    const elsewhere = changed.filter(index => index < from)
    if (elsewhere.length) this.redraw(before, score, elsewhere)
    return true
  }

  private settleLater(): void {
    clearTimeout(this.settling)
    this.settling = setTimeout(() => this.settle(), SETTLE)
  }

  private settle(): void {
    clearTimeout(this.settling)
    this.settling = undefined
    this.rebuild()
  }

  /** Breaks the score into systems anew. Systems and bars that come out the same keep their nodes. */
  private rebuild(anew = false): void {
    const { score } = this.layout
    if (!score || !this.width) return
    if (anew) this.dropViews()
    const systems = layOut(score, this.lineWidth)
    this.layout.indexOf = new Map(score.bars.map((bar, index) => [bar.id, index]))
    for (const view of this.layout.views.splice(systems.length)) this.dropView(view)
    systems.forEach((system, position) => {
      const view = this.layout.views[position]
      if (view) view.setSystem(system, score)
      else this.layout.views.push(this.addView(system, score))
    })
    for (const id of this.layout.bars.keys()) if (!this.layout.indexOf.has(id)) this.layout.bars.delete(id)
    this.drawFirst(score)
    this.lookLater()
    this.drawOverlay()
  }

  /** What is in the window at first is drawn at once, before anyone knows where the window is. */
  private drawFirst(score: Score): void {
    let room = 900
    for (const view of this.layout.views) {
      if (room < 0) return
      if (!view.isDrawn) view.draw(score)
      room -= view.height * this.scale
    }
  }

  private addView(system: System, score: Score): SystemView {
    const view = new SystemView(system, score, this.scale, { pen: this.pen, line: this.lineWidth, bars: this.layout.bars, lanesOf: this.lanesOf })
    this.root.append(view.element)
    return view
  }

  private dropView(view: SystemView): void {
    view.element.remove()
  }

  private dropViews(): void {
    for (const view of this.layout.views.splice(0)) this.dropView(view)
    this.layout.bars.clear()
  }

  private readonly lookLater = (): void => {
    cancelAnimationFrame(this.looking)
    this.looking = requestAnimationFrame(() => this.drawNear())
  }

  /** Draws the systems in and near the window. */
  private drawNear(): void {
    const { score, views } = this.layout
    if (!score) return
    for (let at = this.layout.viewIndexAtY(-NEAR); at < views.length; at++) {
      const view = views[at]!
      if (view.clientBox().top > window.innerHeight + NEAR) return
      if (!view.isDrawn) view.draw(score)
    }
  }

  private drawOverlay(): void {
    const { selection, layout: { score } } = this
    for (const node of this.highlights.splice(0)) node.remove()
    if (!score) return
    const strings = score.head.strings.length
    if (selection?.anchor) this.drawStretch(selection.anchor, selection.cursor, strings)
    const cursor = selection && this.layout.placeOf(selection.cursor)
    const standing = cursor && this.layout.views[cursor.system]
    if (standing) this.cursorBox.place(standing.overlay, cursor.x, selection.cursor.string, strings, standing.tabTop)
    else this.cursorBox.hide()
    const sounding = this.playing && this.layout.placeOf({ barId: this.playing.barId, voice: 'upper', eventId: this.playing.eventIds[0] ?? END })
    if (sounding) {
      const view = this.layout.views[sounding.system]!
      this.highlight(view, drawPlaying(sounding.x, strings, view.tabTop))
    }
  }

  private drawStretch(anchor: Cursor, cursor: Cursor, strings: number): void {
    const ends = [this.layout.placeOf(anchor), this.layout.placeOf(cursor)].flatMap(end => end ?? [])
    if (ends.length < 2) return
    const [from, to] = ends.map(({ index, inBar, system }) => ({ index, x: inBar, system })).sort((a, b) => a.index - b.index || a.x - b.x)
    for (const view of this.layout.views.slice(from!.system, to!.system + 1)) {
      const stretch = stretchIn(view.system, from!, to!)
      if (stretch) this.highlight(view, drawSelection(stretch.from, stretch.to, strings, view.tabTop))
    }
  }

  /** Highlights lie behind the cursor. */
  private highlight(view: SystemView, node: SVGElement): void {
    view.overlay.prepend(node)
    this.highlights.push(node)
  }
}
