import { LANES_TOP, barPlaces, carriedOut, lanesHeight, notationAt, tabHeight, type BarNotation, type System } from '#shared/engraving'
import type { Score } from '#shared/score/types'
import { isDrawnFrom, redrawBar, type DrawnBar } from './bar'
import { isSameSystem } from './changes'
import { drawFrame } from './frame'
import { drawLanes, type LaneLine } from './lanes'
import { drawCrossingLinks } from './links'
import type { Pen } from './staff'
import { at, svg } from './svg'

export interface Surface {
  readonly pen: Pen
  /** Points of a full line: on paper each system takes its part of the page's width. */
  readonly line: number
  /** Drawings of bars by id: a bar that moves to another system keeps its nodes. */
  readonly bars: Map<string, DrawnBar>
  readonly lanesOf: ((score: Score, index: number) => readonly LaneLine[]) | null
}

/** Points left of the bracket, above the highest note and below the lowest lane. */
const LEFT = 10
const ABOVE = 22
const BELOW = 22
/** From the highest note up to the line of metronome marks, and what a mark takes above that line. */
const TEMPO_GAP = 20
const TEMPO_HEIGHT = 20
/** The tab stands at least this far below the staff's top line. */
const TAB_TOP = 104
const TAB_GAP = 34

/** Bar numbers and repeats stand as they stood. */
const isSameFrame = (before: Score, after: Score, { bars }: System): boolean =>
  before === after || (before.head.strings.length === after.head.strings.length && bars.every(({ index }) =>
    barPlaces(before)[index]?.number === barPlaces(after)[index]?.number && before.bars[index]?.repeatEnd === after.bars[index]?.repeatEnd))

function setTransform(node: SVGElement, x: number, y: number): void {
  const transform = `translate(${at(x)} ${at(y)})`
  if (node.getAttribute('transform') !== transform) node.setAttribute('transform', transform)
}

/** One system on the sheet: a block with its own drawing, layers from back to front. */
export class SystemView {
  readonly element = document.createElement('div')
  readonly overlay = svg('g')
  system: System
  tabTop = TAB_TOP
  /** y of the staff's top line. */
  top = 0
  height = 0
  isDrawn = false
  private readonly drawing = svg('svg', { 'aria-hidden': 'true', 'focusable': 'false', 'fill': 'currentColor' })
  private readonly lanes = svg('g')
  private readonly barLayer = svg('g')
  private frame = svg('g')
  private links = svg('g')
  private laneNodes = new Map<string, { lines: readonly LaneLine[], drawn: DrawnBar, x: number, node: SVGGElement }>()

  constructor(system: System, private score: Score, private readonly scale: number, private readonly surface: Surface) {
    this.system = system
    this.element.className = 'system'
    this.drawing.append(this.overlay, this.lanes, this.frame, this.barLayer, this.links)
    this.element.append(this.drawing)
    this.place()
  }

  /** Takes other bars, or other widths. Draws when it has been drawn. */
  setSystem(system: System, score: Score): void {
    const isSame = isSameSystem(this.system, system) && isSameFrame(this.score, score, system)
    this.system = system
    this.score = score
    if (!isSame) this.place()
    if (this.isDrawn) this.draw(score, isSame)
  }

  /** Sets the heights that the notes ask for. */
  private place(): void {
    const strings = this.score.head.strings.length
    const { top, bottom, width } = this.system
    const hasTempo = this.system.bars.some(bar => bar.role.tempo)
    this.top = Math.max(36, -top + ABOVE, hasTempo ? TEMPO_HEIGHT - this.tempoAt : 0)
    this.tabTop = Math.max(TAB_TOP, bottom + TAB_GAP)
    this.height = this.top + this.tabTop + tabHeight(strings) + (this.surface.lanesOf ? lanesHeight(strings) : LANES_TOP) + BELOW
    const [w, h] = [width + LEFT + 1, this.height]
    this.drawing.setAttribute('viewBox', `${-LEFT} ${at(-this.top)} ${at(w)} ${at(h)}`)
    this.drawing.setAttribute('width', `${at(w * this.scale)}`)
    this.drawing.setAttribute('height', `${at(h * this.scale)}`)
    this.element.style.height = `${at(h * this.scale)}px`
    this.drawing.style.setProperty('--share', `${at(100 * w / (this.surface.line + LEFT + 1))}%`)
  }

  /** Above the highest note and its tuplet's figure. */
  private get tempoAt(): number {
    return this.system.top - TEMPO_GAP
  }

  /** From the window's points to the system's. */
  local(clientX: number, clientY: number): { x: number, y: number } {
    const box = this.drawing.getBoundingClientRect()
    return { x: (clientX - box.left) / this.scale - LEFT, y: (clientY - box.top) / this.scale - this.top }
  }

  /** Where the system stands in the window. */
  clientBox(): { readonly top: number, readonly bottom: number } {
    return this.element.getBoundingClientRect()
  }

  /** Draws everything that is not drawn yet. */
  draw(score: Score, keepFrame = false): void {
    this.score = score
    this.isDrawn = true
    if (!keepFrame) this.drawFrame()
    const kept = new Set(this.system.bars.map((_, position) => this.barAt(position).group))
    for (const node of [...this.barLayer.children]) if (!kept.has(node as SVGGElement)) node.remove()
    this.drawLinks()
    this.drawLanes(score)
  }

  /** Draws bars anew where their notation changed; the others keep their nodes and widths. Lanes are drawn by `drawLanes`. */
  redraw(score: Score, positions: readonly number[]): void {
    this.score = score
    if (!this.isDrawn) return
    this.makeRoom(positions)
    for (const position of positions) this.barAt(position)
    this.drawLinks()
  }

  /** Gives back what was drawn. */
  clear(): void {
    this.isDrawn = false
    this.laneNodes.clear()
    for (const layer of [this.lanes, this.frame, this.barLayer, this.links]) layer.replaceChildren()
  }

  private notation(position: number): BarNotation {
    return notationAt(this.score, this.system.bars[position]!.index)
  }

  /** A note outside the room its system had so far: staff and tab move apart at once, widths stay. */
  private makeRoom(positions: readonly number[]): void {
    const reached = positions.map(position => this.notation(position))
    const top = Math.min(this.system.top, ...reached.map(each => each.top))
    const bottom = Math.max(this.system.bottom, ...reached.map(each => each.bottom))
    if (top === this.system.top && bottom === this.system.bottom) return
    this.system = { ...this.system, top, bottom }
    this.place()
    this.drawFrame()
    this.system.bars.forEach((_, position) => this.moveTab(this.barAt(position)))
  }

  private drawFrame(): void {
    const places = barPlaces(this.score)
    const strings = this.score.head.strings.length
    const frame = drawFrame(this.system, { strings, tabTop: this.tabTop, tempoAt: this.tempoAt },
      this.system.bars.map(bar => places[bar.index]!.number), this.system.bars.map(bar => this.score.bars[bar.index]!.repeatEnd))
    this.frame.replaceWith(frame)
    this.frame = frame
  }

  private moveTab(drawn: DrawnBar): void {
    if (drawn.tabTop === this.tabTop) return
    drawn.tabTop = this.tabTop
    setTransform(drawn.tab, 0, this.tabTop)
  }

  /** The bar's nodes, drawn if need be, at their place in this system. */
  barAt(position: number): DrawnBar {
    const { bars, pen } = this.surface
    const placed = this.system.bars[position]!
    const { id } = this.score.bars[placed.index]!
    const key = { notation: this.notation(position), width: placed.width, prefix: placed.prefix, strings: this.score.head.strings.length }
    const before = bars.get(id)
    const drawn = isDrawnFrom(before, key) ? before : redrawBar(pen, id, key, before)
    if (drawn !== before) bars.set(id, drawn)
    if (drawn.group.parentNode !== this.barLayer) this.barLayer.append(drawn.group)
    setTransform(drawn.group, placed.x, 0)
    this.moveTab(drawn)
    return drawn
  }

  private drawLinks(): void {
    const after = this.system.bars.at(-1)!.index + 1
    const isCrossed = this.system.bars.some(({ index }, position) => carriedOut(this.score.bars[index]).length > 0 || (position === 0 && carriedOut(this.score.bars[index - 1]).length > 0))
    if (!isCrossed) {
      if (this.links.firstChild) this.links.replaceChildren()
      return
    }
    const bars = this.system.bars.map((placed, position) => ({ ...this.barAt(position), x: placed.x }))
    const hasNext = after < this.score.bars.length && carriedOut(this.score.bars[after - 1]).length > 0
    const { staff, tab } = drawCrossingLinks(bars, hasNext ? notationAt(this.score, after) : undefined, this.system.width)
    setTransform(tab, 0, this.tabTop)
    this.links.replaceChildren(staff, tab)
  }

  /** Lanes of the bars whose ring changed. */
  drawLanes(score: Score): void {
    const { lanesOf } = this.surface
    if (!lanesOf || !this.isDrawn) return
    setTransform(this.lanes, 0, this.tabTop + tabHeight(score.head.strings.length))
    const seen = new Set<string>()
    this.system.bars.forEach((placed, position) => {
      const { id } = score.bars[placed.index]!
      seen.add(id)
      const lines = lanesOf(score, placed.index)
      const drawn = this.barAt(position)
      const before = this.laneNodes.get(id)
      if (before?.lines === lines && before.drawn === drawn && before.x === placed.x) return
      before?.node.remove()
      const node = drawLanes(lines, drawn.geometry)
      setTransform(node, placed.x, 0)
      this.lanes.append(node)
      this.laneNodes.set(id, { lines, drawn, x: placed.x, node })
    })
    for (const [id, { node }] of this.laneNodes) {
      if (seen.has(id)) continue
      node.remove()
      this.laneNodes.delete(id)
    }
  }
}
