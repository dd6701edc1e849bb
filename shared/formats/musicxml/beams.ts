import { fraction, type Fraction } from '../../score/fraction'
import { beatOf, isCompound } from '../../score/time'
import type { Meter, ScoreEvent } from '../../score/types'

/** `beam` of MusicXML: its value by level, level 1 first. */
export type BeamValue = 'begin' | 'continue' | 'end' | 'forward hook' | 'backward hook'

export interface BeamTime {
  readonly meter: Meter
  /** Ticks of a whole note. */
  readonly whole: number
  /** Ticks by which the bar begins late in its meter: a pickup ends with the bar. */
  readonly offset: number
}

/** Span within which eighths are joined: the beat; in 3/8 the bar; in 5/8 or 7/8 two eighths (common practice). */
function beamSpan(meter: Meter): Fraction {
  if (meter.unit < 8 || isCompound(meter)) return beatOf(meter)
  return fraction(meter.beats === 3 ? 3 : 2, meter.unit)
}

const levelsOf = (event: ScoreEvent): number => (event.notes.length ? Math.max(0, Math.log2(event.length.base) - 2) : 0)

/** Runs of neighbours (positions in the voice) that share beams. */
function groupsOf(events: readonly ScoreEvent[], durations: readonly number[], { meter, whole, offset }: BeamTime): number[][] {
  const span = beamSpan(meter)
  const groups: number[][] = []
  let at = offset
  let last = -1
  events.forEach((event, index) => {
    const beat = Math.floor(at * span.d / (span.n * whole))
    if (levelsOf(event) > 0) {
      const open = groups.at(-1)
      if (open && beat === last && open.at(-1) === index - 1) open.push(index)
      else groups.push([index])
    }
    last = beat
    at += durations[index] ?? 0
  })
  return groups.filter(group => group.length > 1)
}

function valueAt(levels: readonly number[], index: number, level: number): BeamValue {
  const before = (levels[index - 1] ?? 0) >= level
  const after = (levels[index + 1] ?? 0) >= level
  if (before) return after ? 'continue' : 'end'
  if (after) return 'begin'
  return index === 0 ? 'forward hook' : 'backward hook'
}

/** Beams of a voice, by position of its events. */
export function beamsOf(events: readonly ScoreEvent[], durations: readonly number[], time: BeamTime): ReadonlyMap<number, readonly BeamValue[]> {
  const beams = new Map<number, readonly BeamValue[]>()
  for (const group of groupsOf(events, durations, time)) {
    const levels = group.map(index => levelsOf(events[index]!))
    group.forEach((position, index) => {
      beams.set(position, Array.from({ length: levels[index] ?? 0 }, (_, level) => valueAt(levels, index, level + 1)))
    })
  }
  return beams
}
