/** Full scale is 1; nothing leaves the limiter above this (−1 dBFS). */
export const CEILING = 0.891

const RELEASE_SECONDS = 0.25

/** Turns down what would exceed the ceiling at once, and lets go slowly: no sample can pass it, and chords are not torn. */
export function createLimiter(sampleRate: number): (samples: Float32Array) => void {
  const release = Math.exp(-1 / (RELEASE_SECONDS * sampleRate))
  let envelope = 0
  return (samples) => {
    for (let i = 0; i < samples.length; i++) {
      const size = Math.abs(samples[i]!)
      envelope = Math.max(size, envelope * release)
      if (envelope > CEILING) samples[i]! *= CEILING / envelope
    }
  }
}
