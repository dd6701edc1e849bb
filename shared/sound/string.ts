import { frequencyOf } from '../score/pitch'
import { createLoop, type Loop, type LoopWish } from './loop'
import type { SoundNote, Touch } from './types'

/** A string of the instrument: it carries one vibration at a time, and touching it again ends the one before. */
export interface SoundingString {
  readonly touch: (note: SoundNote) => void
  /** Stops the string; with a note's id only if that note still sounds. */
  readonly damp: (noteId?: string) => void
  readonly render: (output: Float32Array, from: number, to: number) => void
}

/** A finger on the string stops it within some hundredths of a second; a new touch at once, but without a click (ours). */
const DAMP_SECONDS = 0.06
const CUT_SECONDS = 0.006

/** Tone by touch (ours): a slur is struck by the fretting hand, hence darker; a dead note is a muffled stroke. */
const TONE: Readonly<Record<Touch, Pick<LoopWish, 'place' | 'brightness'>>> = {
  'pluck': { place: 0.14, brightness: 0.6 },
  'hammer-on': { place: 0.32, brightness: 0.2 },
  'pull-off': { place: 0.27, brightness: 0.3 },
  'dead': { place: 0.2, brightness: 0.1 },
}
const HARMONIC_TONE = { place: 0.35, brightness: 0.25 }
/** Root mean square of one string plucked at full velocity; peaks lie about three times higher. */
const LEVEL = 0.11

export function createString(sampleRate: number, a4 = 440): SoundingString {
  let current: { noteId: string, loop: Loop } | null = null
  let fading: Loop[] = []
  let touches = 0

  function release(seconds: number): void {
    if (!current) return
    current.loop.fade(seconds)
    fading.push(current.loop)
    current = null
  }

  return {
    touch(note) {
      release(CUT_SECONDS)
      const wish = { ...TONE[note.touch], ...(note.harmonic && HARMONIC_TONE) }
      const loop = createLoop(sampleRate, {
        ...wish, brightness: wish.brightness * (0.5 + 0.5 * note.velocity), frequency: frequencyOf(note.midi, a4),
        seconds: note.seconds, level: LEVEL * note.velocity, seed: note.string * 7919 + touches++,
      })
      current = { noteId: note.noteId, loop }
    },
    damp(noteId) {
      if (noteId === undefined || current?.noteId === noteId) release(DAMP_SECONDS)
    },
    render(output, from, to) {
      current?.loop.render(output, from, to)
      if (current?.loop.isSilent()) current = null
      if (!fading.length) return
      for (const loop of fading) loop.render(output, from, to)
      fading = fading.filter(loop => !loop.isSilent())
    },
  }
}
