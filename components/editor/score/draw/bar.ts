import { geometryOf, surplusText, yOfPosition, type BarGeometry, type BarNotation } from '#shared/engraving'
import { drawInnerLinks } from './links'
import { patch } from './patch'
import { drawStaff, type Head, type Pen } from './staff'
import { svg, words } from './svg'
import { drawTab } from './tab'

/** What a bar's drawing depends on, and nothing else. */
export interface BarKey {
  readonly notation: BarNotation
  readonly width: number
  readonly prefix: number
  readonly strings: number
}

/** The nodes of one bar. They are not touched as long as the key is the same. */
export interface DrawnBar extends BarKey {
  readonly group: SVGGElement
  /** Moves down when the staff above needs room. */
  readonly tab: SVGGElement
  /** y at which the tab stands now. */
  tabTop: number
  readonly geometry: BarGeometry
  readonly heads: ReadonlyMap<string, Head>
}

export const isDrawnFrom = (drawn: DrawnBar | undefined, key: BarKey): drawn is DrawnBar =>
  drawn !== undefined && drawn.notation === key.notation && drawn.width === key.width && drawn.prefix === key.prefix && drawn.strings === key.strings

/** How much each voice is over or under: the upper's above the staff, the lower's below. */
function surplusMarks({ notation, width }: BarKey): SVGTextElement[] {
  const style = { 'font-family': 'Alegreya Sans', 'font-size': 12.5, 'font-weight': 700, 'text-anchor': 'end', 'class': 'sheet-caution' }
  return notation.surplus.map(({ voice, amount }) =>
    words(surplusText(amount), width - 3, voice === 'lower' ? yOfPosition(0) + 17 : -7, style))
}

function drawBar(pen: Pen, id: string, key: BarKey): DrawnBar {
  const geometry = geometryOf(key.notation, key.prefix, key.width)
  const staff = drawStaff(pen, key.notation, geometry.columns)
  const links = drawInnerLinks(key.notation, geometry, staff.heads)
  const tab = drawTab(key.notation, geometry, key.strings)
  tab.append(links.tab)
  return { ...key, geometry, heads: staff.heads, tab, tabTop: 0, group: svg('g', { 'data-bar': id }, staff.group, links.staff, tab, ...surplusMarks(key)) }
}

/** Draws a bar; where it was drawn before, its nodes become the new drawing. */
export function redrawBar(pen: Pen, id: string, key: BarKey, before: DrawnBar | undefined): DrawnBar {
  const drawn = drawBar(pen, id, key)
  if (!before) return drawn
  // Both place themselves; a patch shall not undo that.
  for (const [old, now] of [[before.group, drawn.group], [before.tab, drawn.tab]] as const) {
    const place = old.getAttribute('transform')
    if (place !== null) now.setAttribute('transform', place)
  }
  patch(before.group, drawn.group)
  return { ...drawn, group: before.group, tab: before.tab, tabTop: before.tabTop }
}
