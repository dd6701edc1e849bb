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
const after = new WeakMap<Bar, { before: Context, context: Context }>()
const whole = new WeakMap<readonly Bar[], { head: Head, contexts: readonly Context[] }>()

function initial(head: Head): Context {
  let context = first.get(head)
  if (!context) first.set(head, context = { head, meter: DEFAULT_METER, key: DEFAULT_KEY, tempo: DEFAULT_TEMPO })
  return context
}

/** The context inside `bar`. A bar that changes nothing shares its predecessor's very object, so that drawings can compare by identity. */
function step(before: Context, bar: Bar): Context {
  if (!bar.meter && !bar.key && !bar.tempo) return before
  const known = after.get(bar)
  if (known?.before === before) return known.context
  const context = {
    head: before.head,
    meter: bar.meter ?? before.meter,
    key: bar.key ?? before.key,
    tempo: bar.tempo ?? before.tempo,
  }
  after.set(bar, { before, context })
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
