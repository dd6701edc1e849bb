import { ZERO, add, compare, subtract, toNumber, type Fraction } from '../score/fraction'
import { VOICE_NAMES, type VoiceName } from '../score/types'
import { HEAD_WIDTH, LEAD } from './metrics'
import { columnsOf } from './spacing'
import type { BarNotation } from './types'

export interface EventPlace {
  readonly eventId: string
  readonly voice: VoiceName
  /** Middle of the event's head, from the bar's left edge. */
  readonly x: number
}

/** Where things are in a drawn bar. x in points from the bar's left edge, which is the bar line before it. */
export interface BarGeometry {
  readonly width: number
  /** Left edges of the heads, one a column. */
  readonly columns: readonly number[]
  /** In time order. */
  readonly events: readonly EventPlace[]
  /** The open end of each voice, behind its last event. */
  readonly ends: Readonly<Record<VoiceName, number>>
  readonly times: readonly { readonly at: number, readonly x: number }[]
}

/** The open end of a full bar lies just before the bar line. */
const END_INSET = 11

/** @param prefix points that clef, key and meter take */
export function geometryOf(notation: BarNotation, prefix: number, width: number): BarGeometry {
  const { slices, events, total, missing } = notation
  const columns = columnsOf(slices, width - prefix, missing).map(x => x + prefix)
  const centre = HEAD_WIDTH / 2
  const filled = subtract(total, missing ?? ZERO)
  const first = columns[0] ?? prefix + LEAD
  const times = [...slices.map((slice, index) => ({ at: toNumber(slice.at), x: columns[index]! })), { at: toNumber(total), x: width }]
  const base = { width, columns, times, events: events.map(({ eventId, voice, slice }) => ({ eventId, voice, x: columns[slice]! + centre })) }
  const last = columns.at(-1)
  const endAt = (at: Fraction): number => {
    if (compare(at, ZERO) === 0) return first + centre
    // Behind the last column of an unfinished bar the next one is expected at a note's distance.
    if (missing && last !== undefined && compare(at, filled) === 0) return Math.min(width - END_INSET, last + centre + Math.max(24, (slices.at(-1)?.ideal ?? 0)))
    return Math.min(width - END_INSET, xAt(base, toNumber(at)) + centre)
  }
  const ends = Object.fromEntries(VOICE_NAMES.map(name => [name, endAt(endOf(notation, name))])) as Record<VoiceName, number>
  return { ...base, ends }
}

/** Where a voice ends in time. */
export const endOf = (notation: BarNotation, voice: VoiceName): Fraction =>
  notation.events.filter(event => event.voice === voice).reduce((_, event) => add(event.start, event.duration), ZERO)

/** x of a time in whole notes from the bar line: between columns as far as the time is between them. */
export function xAt(geometry: Pick<BarGeometry, 'times' | 'width'>, at: number): number {
  const { times } = geometry
  const next = times.findIndex(each => each.at > at)
  if (next === 0) return times[0]!.x
  const before = times.at(next < 0 ? -1 : next - 1)
  const after = next < 0 ? undefined : times[next]
  if (!before || !after) return geometry.width
  return before.x + (after.x - before.x) * (at - before.at) / (after.at - before.at)
}

/** The event of a voice nearest to x, or 'end' when its open end is nearer. */
export function cellAt(geometry: BarGeometry, voice: VoiceName, x: number): string {
  const places = [...geometry.events.filter(event => event.voice === voice), { eventId: 'end', x: geometry.ends[voice] }]
  return places.reduce((best, each) => (Math.abs(each.x - x) < Math.abs(best.x - x) ? each : best)).eventId
}
