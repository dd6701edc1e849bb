import { clampRate, createEnsemble } from './ensemble'
import type { Schedule } from './types'

export interface RenderOptions {
  /** 0.25 to 1.5. */
  readonly rate?: number
  readonly click?: boolean
  /** Seconds of ringing out behind the last bar line. */
  readonly tail?: number
}

/** Samples in a block; an audio worklet's own size, so that both take the same path. */
const BLOCK = 128

/** Plays a schedule into one channel of samples, as fast as the machine can. */
export function render(schedule: Schedule, sampleRate: number, { rate = 1, click = false, tail = 3 }: RenderOptions = {}): Float32Array {
  const ensemble = createEnsemble(sampleRate)
  ensemble.play(schedule, rate, click)
  const samples = new Float32Array(Math.ceil((schedule.length / clampRate(rate) + tail) * sampleRate))
  for (let from = 0; from < samples.length; from += BLOCK) ensemble.process(samples.subarray(from, Math.min(from + BLOCK, samples.length)))
  return samples
}
