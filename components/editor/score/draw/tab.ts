import { HEAD_WIDTH, STRING_SPACE, tabTextWidth, type BarGeometry, type BarNotation, type TabMark } from '#shared/engraving'
import { at, svg, words } from './svg'

export const TAB_FONT = { 'font-family': 'Alegreya Sans', 'font-size': 14.5, 'font-weight': 500, 'text-anchor': 'middle', 'style': 'font-variant-numeric: lining-nums tabular-nums' } as const
/** Half the height of a lining digit of 14.5 points. */
const DIGIT_RISE = 4.7

export const tabX = (mark: Pick<TabMark, 'slice' | 'beside'>, geometry: BarGeometry): number =>
  geometry.columns[mark.slice]! + HEAD_WIDTH / 2 + (mark.beside ? 14 : 0)

/** A string's line, interrupted where numbers stand: no line runs through a fret. */
function stringLine(string: number, width: number, gaps: readonly (readonly [number, number])[]): string {
  const y = (string - 1) * STRING_SPACE
  let from = 0
  let path = ''
  for (const [left, right] of gaps) {
    if (left > from) path += `M${at(from)} ${y}H${at(left)}`
    from = Math.max(from, right)
  }
  return from < width ? `${path}M${at(from)} ${y}H${at(width)}` : path
}

/** Tab of a bar; y = 0 is string 1. */
export function drawTab(notation: BarNotation, geometry: BarGeometry, strings: number): SVGGElement {
  const path = Array.from({ length: strings }, (_, index) => {
    const gaps = notation.tab.filter(mark => mark.string === index + 1).map((mark) => {
      const x = tabX(mark, geometry)
      const half = tabTextWidth(mark.text) / 2 + 1.5
      return [x - half, x + half] as const
    }).sort((a, b) => a[0] - b[0])
    return stringLine(index + 1, geometry.width, gaps)
  }).join('')
  const lines = svg('path', { d: path, class: 'sheet-line', fill: 'none' })
  const frets = notation.tab.map(mark => words(mark.text, tabX(mark, geometry), (mark.string - 1) * STRING_SPACE + DIGIT_RISE))
  return svg('g', {}, lines, svg('g', TAB_FONT, ...frets))
}
