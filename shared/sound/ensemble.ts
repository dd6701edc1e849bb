import { createClick } from './click'
import { createLimiter } from './limiter'
import type { Loop } from './loop'
import { createString, type SoundingString } from './string'
import type { Schedule, SoundEvent, SoundNote } from './types'

/** 25 to 150 percent of the written tempo. */
export const RATE = { slowest: 0.25, fastest: 1.5 } as const
export const clampRate = (rate: number): number => Math.min(RATE.fastest, Math.max(RATE.slowest, rate))

/** All strings together, and the schedule that plays them. Knows nothing of the machine it runs on: it fills blocks of samples. */
export interface Ensemble {
  /** Sounds notes now, beside whatever is played. */
  readonly sound: (notes: readonly SoundNote[]) => void
  readonly play: (schedule: Schedule, rate: number, click: boolean) => void
  readonly setRate: (rate: number) => void
  readonly setClick: (click: boolean) => void
  /** Ends playing and damps every string. */
  readonly stop: () => void
  /** Damps these strings, or all. */
  readonly damp: (strings?: readonly number[]) => void
  /** Seconds at the written tempo since the start of what is played; null: nothing is. */
  readonly position: () => number | null
  /** Overwrites the block. */
  readonly process: (output: Float32Array) => void
}

export function createEnsemble(sampleRate: number): Ensemble {
  const strings = new Map<number, SoundingString>()
  const limit = createLimiter(sampleRate)
  let clicks: Loop[] = []
  let schedule: Schedule | null = null
  let at = 0, next = 0, rate = 1, isClicking = false

  function stringOf(number: number): SoundingString {
    let string = strings.get(number)
    if (!string) strings.set(number, string = createString(sampleRate))
    return string
  }

  const sound = (notes: readonly SoundNote[]) => notes.forEach(note => stringOf(note.string).touch(note))

  function damp(numbers?: readonly number[]): void {
    for (const [number, string] of strings) if (!numbers || numbers.includes(number)) string.damp()
  }

  function perform(event: SoundEvent): void {
    if (event.kind === 'sound') sound([event.note])
    else if (event.kind === 'damp') strings.get(event.string)?.damp(event.noteId)
    else if (isClicking) clicks.push(createClick(sampleRate, event.accent))
  }

  function render(output: Float32Array, from: number, to: number): void {
    if (from === to) return
    for (const string of strings.values()) string.render(output, from, to)
    for (const click of clicks) click.render(output, from, to)
    clicks = clicks.filter(click => !click.isSilent())
  }

  /** Renders the block in pieces, so that each event falls on its own sample. */
  function advance(output: Float32Array): void {
    const end = at + output.length * rate / sampleRate
    let done = 0
    for (let event = schedule?.events[next]; event && event.at < end; event = schedule?.events[++next]) {
      const due = Math.max(done, Math.min(output.length, Math.round((event.at - at) / rate * sampleRate)))
      render(output, done, due)
      perform(event)
      done = due
    }
    render(output, done, output.length)
    at = end
    // What is damped behind the last bar line is still to come; after that the strings ring out.
    if (schedule && at >= schedule.length && next >= schedule.events.length) schedule = null
  }

  return {
    sound,
    damp,
    play(what, speed, click) {
      damp()
      schedule = what
      at = next = 0
      rate = clampRate(speed)
      isClicking = click
    },
    setRate(speed) { rate = clampRate(speed) },
    setClick(click) { isClicking = click },
    stop() {
      schedule = null
      clicks = []
      damp()
    },
    position: () => (schedule ? at : null),
    process(output) {
      output.fill(0)
      if (schedule) advance(output)
      else render(output, 0, output.length)
      limit(output)
    },
  }
}
