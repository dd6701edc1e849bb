import { ZERO, add, divide, fraction, type Fraction } from '../../score/fraction'
import { beatOf, isCompound, lengthOf } from '../../score/time'
import type { Meter, ScoreEvent, Voice } from '../../score/types'

/** `beam` of MusicXML: its value by level, level 1 first; an empty list where an event has none. */
export type BeamValue = 'begin' | 'continue' | 'end' | 'forward hook' | 'backward hook'

/** Span within which eighths are joined: the beat; in 3/8 the bar; in 5/8 or 7/8 two eighths (common practice). */
function beamSpan(meter: Meter): Fraction {
  if (meter.unit < 8 || isCompound(meter)) return beatOf(meter)
  return fraction(meter.beats === 3 ? 3 : 2, meter.unit)
}

const levelsOf = (event: ScoreEvent): number => (event.notes.length ? Math.max(0, Math.log2(event.length.base) - 2) : 0)

/** Runs of neighbours (positions in the voice) that share beams. */
function groupsOf(voice: Voice, meter: Meter, offset: Fraction): number[][] {
  const span = beamSpan(meter)
  const groups: number[][] = []
  let at = offset
  let last = -1
  voice.events.forEach((event, index) => {
    const beats = divide(at, span)
    const beat = Math.floor(beats.n / beats.d)
    if (levelsOf(event) > 0) {
      const open = groups.at(-1)
      if (open && beat === last && open.at(-1) === index - 1) open.push(index)
      else groups.push([index])
    }
    last = beat
    at = add(at, lengthOf(event.length, voice.tuplets))
  })
  return groups.filter(group => group.length > 1)
}

function valueAt(levels: readonly number[], index: number, level: number): BeamValue | null {
  if ((levels[index] ?? 0) < level) return null
  const before = (levels[index - 1] ?? 0) >= level
  const after = (levels[index + 1] ?? 0) >= level
  if (before) return after ? 'continue' : 'end'
  if (after) return 'begin'
  return index === 0 ? 'forward hook' : 'backward hook'
}

/** Beams of a voice, by position of its events.
 * @param offset where the bar begins in its meter, in whole notes: a pickup ends with the bar */
export function beamsOf(voice: Voice, meter: Meter, offset: Fraction = ZERO): ReadonlyMap<number, readonly BeamValue[]> {
  const beams = new Map<number, readonly BeamValue[]>()
  for (const group of groupsOf(voice, meter, offset)) {
    const levels = group.map(index => levelsOf(voice.events[index]!))
    group.forEach((position, index) => {
      const values: BeamValue[] = []
      for (let level = 1; level <= (levels[index] ?? 0); level++) {
        const value = valueAt(levels, index, level)
        if (value) values.push(value)
      }
      beams.set(position, values)
    })
  }
  return beams
}
