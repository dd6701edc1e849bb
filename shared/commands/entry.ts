import type { EditorState, IdSource } from '../editor'
import { compare, fraction, subtract, sum } from '../score/fraction'
import { plainLength } from '../score/time'
import type { Length, ScoreEvent, Tuplet, Voice } from '../score/types'

/** What is still missing of a tuplet, counted in its own written lengths. Inner tuplets count as what they stand for. */
export function missingOf(voice: Voice, tuplet: Tuplet) {
  const written = voice.events.filter(event => event.length.tuplets?.includes(tuplet.id)).map(event => plainInside(event, voice, tuplet.id))
  return subtract(fraction(tuplet.actual, tuplet.base), sum(written))
}

/** Length of an event as the tuplet `id` counts it: scaled by the tuplets that lie inside it, not by itself or those around it. */
function plainInside(event: ScoreEvent, voice: Voice, id: string) {
  const inner = event.length.tuplets!.slice(event.length.tuplets!.indexOf(id) + 1)
  return inner.reduce((value, each) => {
    const tuplet = voice.tuplets!.find(known => known.id === each)!
    return fraction(value.n * tuplet.normal, value.d * tuplet.actual)
  }, plainLength(event.length))
}

/** An unfinished tuplet at the voice's end takes in the next event while it fits. */
function openTuplets(voice: Voice, entry: EditorState['entry']): readonly string[] {
  const around = voice.events.at(-1)?.length.tuplets ?? []
  for (let depth = around.length; depth > 0; depth--) {
    const tuplet = voice.tuplets?.find(each => each.id === around[depth - 1])
    if (tuplet && compare(plainLength(entry), missingOf(voice, tuplet)) <= 0) return around.slice(0, depth)
  }
  return []
}

/** A rest of the entry length for the voice's end, in the tuplet being entered there. */
export function newEvent(voice: Voice, entry: EditorState['entry'], ids: IdSource): ScoreEvent {
  const tuplets = openTuplets(voice, entry)
  const length: Length = { base: entry.base, dots: entry.dots, ...(tuplets.length && { tuplets }) }
  return { id: ids.next(), length, notes: [] }
}
