import type { Bar, Head, Key, Meter, Score, Tempo } from './types'

/** What holds in a bar: the head's strings and capos, with the meter, key and tempo last stated. */
export interface Context {
  readonly head: Head
  readonly meter: Meter
  readonly key: Key
  readonly tempo: Tempo
}

export const DEFAULT_METER: Meter = { beats: 4, unit: 4 }
export const DEFAULT_KEY: Key = { fifths: 0, mode: 'major' }
export const DEFAULT_TEMPO: Tempo = { base: 4, dots: 0, perMinute: 80 }

const first = new WeakMap<Head, Context>()
const after = new WeakMap<Context, Context[]>()
const whole = new WeakMap<readonly Bar[], { head: Head, contexts: readonly Context[] }>()

function initial(head: Head): Context {
  let context = first.get(head)
  if (!context) first.set(head, context = { head, meter: DEFAULT_METER, key: DEFAULT_KEY, tempo: DEFAULT_TEMPO })
  return context
}

/** Changes remembered behind one context; a piece in progress has one or two, undo and redo a few more. */
const REMEMBERED = 8

/**
 * The context inside `bar`. The same changes behind the same context give the very same object, so that drawings can compare by
 * identity: notes typed in a bar which states a meter leave the contexts of all bars behind it as they were.
 */
function step(before: Context, bar: Bar): Context {
  const { meter = before.meter, key = before.key, tempo = before.tempo } = bar
  if (meter === before.meter && key === before.key && tempo === before.tempo) return before
  const known = after.get(before) ?? []
  const same = known.find(each => each.meter === meter && each.key === key && each.tempo === tempo)
  if (same) return same
  const context = { head: before.head, meter, key, tempo }
  after.set(before, [context, ...known].slice(0, REMEMBERED))
  return context
}

/** Contexts of all bars, by position. */
export function contextsOf(score: Score): readonly Context[] {
  const known = whole.get(score.bars)
  if (known?.head === score.head) return known.contexts
  let context = initial(score.head)
  const contexts = score.bars.map(bar => (context = step(context, bar)))
  whole.set(score.bars, { head: score.head, contexts })
  return contexts
}

/** Context of the bar at `index`; beyond the last bar, the context a new bar would have. */
export function contextOf(score: Score, index: number): Context {
  const contexts = contextsOf(score)
  return contexts[Math.min(index, contexts.length - 1)] ?? initial(score.head)
}
