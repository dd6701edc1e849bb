import { openMidi } from '#shared/score/sounding'
import { secondsToDie } from '#shared/ring'
import type { Schedule, SoundEvent } from '#shared/sound'
import type { Neck } from '#shared/tunings/board'
import { usePlayer } from './usePlayer'

/** A string plucked at a pitch. */
export interface Tone {
  readonly string: number
  readonly midi: number
  readonly open: boolean
}

/** A stretch to be heard one by one, and a chord rolled from its lowest string, in seconds from stroke to stroke (ours). */
const STEP = 0.45
const ROLL = 0.06
const WAS_BECOMES = 1.5
const LEVEL = 0.85

/** Each string rings until it is plucked again or dies away. */
function scheduleOfTones(tones: readonly Tone[], step: number): Schedule {
  const events = tones.map(({ string, midi, open }, index): SoundEvent => ({
    kind: 'sound', at: index * step,
    note: { noteId: `tone-${index}`, string, midi, touch: 'pluck', velocity: LEVEL, seconds: secondsToDie(midi, open) },
  }))
  return { length: Math.max(0, tones.length - 1) * step + 2.5, events, moments: [] }
}

const openTones = (neck: Neck): Tone[] =>
  neck.strings.map((_, index) => ({ string: index + 1, midi: openMidi(neck, index + 1), open: true })).reverse()

/** Lets a tuning be heard, string by string, without a score. Sound is loaded only when it is first asked for. */
export function useHear() {
  const player = usePlayer()
  const hear = (tones: readonly Tone[], step: number) => void player.playTones(scheduleOfTones(tones, step))
  return {
    /** A string, open or fretted. */
    hearString: (tone: Tone) => hear([tone], STEP),
    /** Strings together, rolled in the order given. */
    hearChord: (tones: readonly Tone[]) => hear(tones, ROLL),
    /** The open strings, capo on, from the highest number to the first. */
    hearOpen: (neck: Neck) => hear(openTones(neck), ROLL),
    /** One after another. */
    hearRun: (tones: readonly Tone[]) => hear(tones, STEP),
    /** A retuned string as it was, then as it will be. */
    hearChange: (string: number, was: number, becomes: number) =>
      hear([{ string, midi: was, open: true }, { string, midi: becomes, open: true }], WAS_BECOMES),
    /** Why nothing is heard, and what helps; null where all is well. */
    message: player.message,
  }
}
