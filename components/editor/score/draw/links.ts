import { STRING_SPACE, type BarGeometry, type BarNotation, type Link } from '#shared/engraving'
import type { Head } from './staff'
import { arc, svg, words } from './svg'
import { tabX } from './tab'

/** Where a link starts or ends, on the staff and in the tab; x from the bar's left edge. */
interface End { readonly staffX: number, readonly staffY: number, readonly tip: number, readonly tabX: number, readonly stem: 1 | -1 }

export interface LinkParts { readonly staff: SVGGElement, readonly tab: SVGGElement }

const LETTER = { 'tie': '', 'hammer-on': 'H', 'pull-off': 'P' } as const
/** Length of a link whose note is not there yet. */
const STUB = 22
/** Room before the first head of a system. */
const ENTRY = 15

function endOf(noteId: string, notation: BarNotation, geometry: BarGeometry, heads: ReadonlyMap<string, Head>, side: 'left' | 'right'): End | null {
  const head = heads.get(noteId)
  const event = notation.events.find(each => each.notes.some(note => note.noteId === noteId))
  if (!head || !event) return null
  // A head that shares its number with the other voice has no mark of its own.
  return { staffX: side === 'left' ? head.left - 1 : head.right + 1, staffY: head.y, tip: head.tip, tabX: tabX({ slice: event.slice, beside: false }, geometry), stem: head.stem }
}

export const startOf = (link: Link, notation: BarNotation, geometry: BarGeometry, heads: ReadonlyMap<string, Head>): End | null =>
  (link.from ? endOf(link.from, notation, geometry, heads, 'right') : null)
export const goalOf = (link: Link, notation: BarNotation, geometry: BarGeometry, heads: ReadonlyMap<string, Head>): End | null =>
  (link.to ? endOf(link.to, notation, geometry, heads, 'left') : null)

const shift = (end: End, by: number): End => ({ ...end, staffX: end.staffX + by, tabX: end.tabX + by })

/** A lone voice bows its links at the heads, away from the stems; with two voices they bow to their voice's side (Gould, ties and slurs). */
function sideOf(link: Link, start: End, isPolyphonic: boolean): 1 | -1 {
  if (isPolyphonic && link.voice !== 'middle') return link.voice === 'upper' ? -1 : 1
  return start.stem === 1 ? 1 : -1
}

/** One link between two ends; a missing end is made up: at the line's edge, or a stub. Incomplete links are dashed. */
export function drawLink(link: Link, start: End, goal: End, complete: boolean, isPolyphonic: boolean): { staff: Element, tab: Element[] } {
  const side = sideOf(link, start, isPolyphonic)
  const look: Readonly<Record<string, string | number>> = complete ? {} : { 'fill': 'none', 'stroke': 'currentColor', 'stroke-width': 1.1, 'stroke-dasharray': '3 2.5', 'class': 'sheet-soft' }
  const isTie = link.kind === 'tie'
  // A tie runs from edge to edge of its heads, a slur from middle to middle.
  const inset = isTie ? 0 : 5
  // On the side of the stems a slur stands clear of them.
  const height = (end: End): number => (isTie ? end.staffY + 5 * side : side === end.stem ? end.staffY + 8 * side : end.tip + 4 * side)
  const staff = arc(start.staffX - inset, height(start), goal.staffX + inset, height(goal), side, look)
  const y = (link.string - 1) * STRING_SPACE - 5
  const from = start.tabX + 3
  const to = goal.tabX - 3
  const letter = LETTER[link.kind]
  // Above the tab, where no line runs through it.
  const tab = isTie && complete ? [] : [arc(from, y, to, y, -1, look)]
  const label = letter ? [words(letter, (from + to) / 2, link.string === 1 ? y - 8 : -6.5, { 'font-family': 'Alegreya Sans', 'font-size': 10, 'text-anchor': 'middle', 'class': complete ? '' : 'sheet-soft' })] : []
  return { staff, tab: [...tab, ...label] }
}

function collect(drawn: readonly { staff: Element, tab: Element[] }[]): LinkParts {
  return { staff: svg('g', {}, ...drawn.map(each => each.staff)), tab: svg('g', {}, ...drawn.flatMap(each => each.tab)) }
}

/** Links that start and end in the bar. */
export function drawInnerLinks(notation: BarNotation, geometry: BarGeometry, heads: ReadonlyMap<string, Head>): LinkParts {
  return collect(notation.links.flatMap((link) => {
    const start = startOf(link, notation, geometry, heads)
    const goal = goalOf(link, notation, geometry, heads)
    return start && goal ? [drawLink(link, start, goal, link.complete, notation.isPolyphonic)] : []
  }))
}

export interface LinkedBar { readonly x: number, readonly notation: BarNotation, readonly geometry: BarGeometry, readonly heads: ReadonlyMap<string, Head> }

/** Links that cross the bar lines of a system, or its ends. @param next the bar that follows the system */
export function drawCrossingLinks(bars: readonly LinkedBar[], next: BarNotation | undefined, width: number): LinkParts {
  return collect(bars.flatMap((bar, index) => {
    const { notation, geometry, heads } = bar
    const after = bars[index + 1]
    const leaving = notation.links.filter(link => link.to === null).flatMap((link) => {
      const start = startOf(link, notation, geometry, heads)
      if (!start) return []
      const from = shift(start, bar.x)
      const met = (after?.notation ?? next)?.links.find(each => each.from === null && each.voice === link.voice && each.string === link.string)
      const goal = met && after ? goalOf(met, after.notation, after.geometry, after.heads) : null
      if (goal && after) return [drawLink(link, from, shift(goal, after.x), met!.complete, notation.isPolyphonic)]
      const edge = met ? width - 2 : Math.min(width - 2, from.staffX + STUB)
      return [drawLink(link, from, { ...from, staffX: edge, tabX: Math.max(edge, from.tabX + 8) }, !!met?.complete, notation.isPolyphonic)]
    })
    // What comes over from the system before starts behind the clef.
    const entering = index > 0
      ? []
      : notation.links.filter(link => link.from === null).flatMap((link) => {
          const goal = goalOf(link, notation, geometry, heads)
          return goal ? [drawLink(link, shift(goal, -ENTRY), goal, link.complete, notation.isPolyphonic)] : []
        })
    return [...leaving, ...entering]
  }))
}
