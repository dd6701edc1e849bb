import { LANES_TOP, LANE_SPACE, xAt, type BarGeometry } from '#shared/engraving'
import type { Fraction } from '#shared/score/fraction'
import { at, svg } from './svg'

/** How long a string is heard in a bar; times from the bar line. */
export interface LaneLine {
  readonly string: number
  readonly from: Fraction
  readonly to: Fraction
  readonly open: boolean
  readonly starts: boolean
  readonly ends: boolean
}

const HEAD = 6

function stroke(line: LaneLine, geometry: BarGeometry): string {
  const left = line.starts ? xAt(geometry, line.from.n / line.from.d) + HEAD : 0
  const right = line.ends ? xAt(geometry, line.to.n / line.to.d) + HEAD - 3 : geometry.width
  const y = LANES_TOP + (line.string - 1) * LANE_SPACE
  return `M${at(left)} ${at(y)}H${at(Math.max(left + 2, Math.min(right, geometry.width)))}`
}

/** A thin line for each string that sounds, ordered by string; y = 0 is the last string of the tab. */
export function drawLanes(lanes: readonly LaneLine[], geometry: BarGeometry): SVGGElement {
  const path = (open: boolean): string => lanes.filter(line => line.open === open).map(line => stroke(line, geometry)).join('')
  return svg('g', {}, svg('path', { d: path(false), class: 'lane' }), svg('path', { d: path(true), class: 'lane lane-open' }))
}
