export interface Tone {
  readonly setHertz: (hertz: number) => void
  /** 0 to 1. */
  readonly setVolume: (volume: number) => void
  readonly stop: () => void
}

/** Amplitudes of the partials, exact multiples: a low note is heard from a small loudspeaker by its upper ones (ours). */
const PARTIALS = [0, 1, 0.6, 0.4, 0.25, 0.16, 0.1, 0.06, 0.04]
/** Amplitude at full volume: eight partials together stay well below full scale. */
const LOUDEST = 0.5
/** Seconds in which it swells and fades, so that nothing clicks. */
const SWELL = 0.08

/** A steady tone, in tune as exactly as the sound card's clock. To be called while a key or click is handled; null where there is no sound. */
export function startTone(hertz: number, volume: number): Tone | null {
  if (typeof AudioContext === 'undefined') return null
  const context = new AudioContext()
  const wave = context.createPeriodicWave(new Float32Array(PARTIALS.length), Float32Array.from(PARTIALS))
  const tone = new OscillatorNode(context, { type: 'custom', periodicWave: wave, frequency: hertz })
  const loudness = new GainNode(context, { gain: 0 })
  const amplitude = (value: number) => LOUDEST * value ** 2
  const glide = (to: number) => loudness.gain.setTargetAtTime(to, context.currentTime, SWELL / 3)
  tone.connect(loudness).connect(context.destination)
  tone.start()
  void context.resume()
  glide(amplitude(volume))
  return {
    setHertz: (value) => { tone.frequency.value = value },
    setVolume: value => glide(amplitude(value)),
    stop() {
      glide(0)
      setTimeout(() => void context.close(), 3 * SWELL * 1000)
    },
  }
}
