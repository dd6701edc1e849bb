import { listenTo, type Ear } from './partials'
import { findPeriod } from './period'
import { measureSeries, noiseBetween } from './series'

/** A pitch heard. */
export interface Heard {
  /** Of the first partial. */
  readonly hertz: number
  /** 0 to 1: how exactly the sound repeats. */
  readonly clarity: number
  /** Inharmonicity B of the string. */
  readonly stretch: number
}

/** Below the lowest and above the highest open string that an instrument here can have (A0, C7), with room for one out of tune. */
const LOWEST = 25
const HIGHEST = 2300
/** Partials are sought up to here; beyond, a plucked string has little. */
const HIGHEST_PARTIAL = 6000
/** Less repeats itself by chance. */
const CLEAR = 0.6
/** Root mean square below which a microphone hears its own noise, full scale 1. */
const SILENT = 0.0004
/**
 * Power of the partials between those of a pitch, against its strongest, which make it an overtone of a lower string. The lower string
 * may be the one sought, heard by a poor microphone (43 dB suffice); or the pitch itself may be sought, while lower strings still ring
 * (14 dB are needed); else in between (24 dB). Ours.
 */
const BETWEEN = { baseIsSought: 5e-5, pitchIsSought: 0.04, neither: 0.004 } as const
/** The lowest of them alone is enough at this strength: when a string has nearly died away the others are gone. */
const LONE = 0.01
/** And this far above the noise, since one chance in a thousand frames would be an octave wrong. */
const STANDS_OUT = 25

/** A window holds this many periods of the lowest pitch to be told. */
const PERIODS = 8
const WINDOWS = [4096, 8192, 16_384, 32_768] as const

/** Samples to listen to at a time for pitches down to `lowest` hertz: short, for a quick answer, but long enough to keep partials apart. */
export const windowFor = (lowest: number, rate: number): number =>
  WINDOWS.find(size => size / rate >= PERIODS / lowest) ?? WINDOWS.at(-1)!

const loudness = (samples: Float32Array): number => Math.sqrt(samples.reduce((sum, value) => sum + value * value, 0) / samples.length)

/** Whether a pitch is the second partial (or third) of a string whose own, odd ones are weak.
 * @param between the power against the strongest that they need */
function isOvertone(ear: Ear, hertz: number, times: number, between: number): boolean {
  const base = hertz / times
  const own = Math.max(...[1, 2, 3].map(number => ear.power(number * hertz)))
  const floor = Math.max(STANDS_OUT * noiseBetween(ear, hertz), own * between)
  const numbers = [1, 2, 3, 4, 5].filter(number => number % times !== 0).slice(0, 3)
  const found = numbers.filter(number => standsAt(ear, number * base, base, floor))
  return found.length >= 2 || (found.includes(1) && ear.power(base) > LONE * own)
}

/** A sine near a frequency, not only the foot of a stronger one beside it. */
function standsAt(ear: Ear, expected: number, base: number, floor: number): boolean {
  const found = ear.sine(expected)
  return found.power > floor && Math.abs(found.hertz - expected) < 0.1 * base && ear.power(found.hertz) > floor
}

/**
 * The pitch of a plucked string, or null where none is heard. Coarsely by likeness (McLeod), freed of octave errors by the partials,
 * then exactly by the partials' phases and a stiff string's law.
 * @param samples a power of two of them, the newest last (see `windowFor`)
 * @param rate samples a second
 * @param sought hertz of the string being tuned: decides between octaves only where the sound leaves both open
 */
export function detectPitch(samples: Float32Array, rate: number, sought?: number): Heard | null {
  if (loudness(samples) < SILENT) return null
  const period = findPeriod(samples, rate / HIGHEST, rate / LOWEST)
  if (!period || period.clarity < CLEAR) return null
  const ear = listenTo(samples, rate)
  const rough = ownPitch(ear, rate / period.lag, sought)
  const series = measureSeries(ear, rough, Math.min(HIGHEST_PARTIAL, 0.45 * rate))
  if (!series) return null
  return { hertz: series.first, clarity: Math.min(1, period.clarity), stretch: series.stretch }
}

const isNear = (hertz: number, sought: number | undefined): boolean => sought !== undefined && Math.abs(Math.log2(hertz / sought)) < 0.3

function ownPitch(ear: Ear, hertz: number, sought: number | undefined): number {
  const times = [2, 3].find((each) => {
    const evidence = isNear(hertz / each, sought) ? 'baseIsSought' : isNear(hertz, sought) ? 'pitchIsSought' : 'neither'
    return hertz / each >= LOWEST && isOvertone(ear, hertz, each, BETWEEN[evidence])
  })
  return times ? hertz / times : hertz
}
