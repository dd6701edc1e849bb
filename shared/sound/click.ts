import type { Loop } from './loop'

/** A woodblock-like tick, higher on the first beat of a bar (common practice); figures ours. */
const HERTZ = { accent: 2100, plain: 1500 }
const LEVEL = { accent: 0.28, plain: 0.18 }
const SECONDS = 0.04

export function createClick(sampleRate: number, accent: boolean): Loop {
  const kind = accent ? 'accent' : 'plain'
  const step = 2 * Math.PI * HERTZ[kind] / sampleRate
  const decay = 10 ** (-3 / (SECONDS * sampleRate))
  let phase = 0, volume = LEVEL[kind]
  return {
    render(output, from, to) {
      for (let i = from; i < to; i++, phase += step, volume *= decay) output[i]! += Math.sin(phase) * volume
    },
    fade: () => { volume = 0 },
    isSilent: () => volume < 1e-4,
  }
}
