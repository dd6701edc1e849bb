import { chromaOf } from './board'
import type { Melody } from './melody'

/** How a melody moved by some half steps lies on open strings: everything in parts of 1. */
export interface Fit {
  /** Half steps from the melody as given. */
  readonly shift: number
  /** Part of the melody's time on open strings. */
  readonly open: number
  /** Part within reach above the lower strings: from the lowest melody string open to twelve frets above the highest. */
  readonly range: number
  /** Part that no string of this neck sounds at all. */
  readonly lost: number
  /** Part of the harmony's bass notes below the melody: an open string counts whole, one held within four frets a little over half. */
  readonly bass: number
  readonly openPitches: readonly number[]
  readonly openRoots: readonly number[]
  readonly heldRoots: readonly number[]
  readonly wantingRoots: readonly number[]
}

/** Pitches with their shares of the time, worked out once for a melody. */
export type Histogram = readonly (readonly [midi: number, share: number])[]

export function histogramOf({ notes }: Melody): Histogram {
  const total = notes.reduce((sum, each) => sum + each.length, 0)
  const pitches = [...new Set(notes.map(each => each.midi))].sort((a, b) => a - b)
  return pitches.map(midi => [midi, notes.filter(each => each.midi === midi).reduce((sum, each) => sum + each.length, 0) / total])
}

/** A held bass note is worth this against an open one (ours), and lies within so many frets. */
const HELD = 0.6
const BASS_FRETS = 4

/** Strings with a capo on, as the fit needs them. */
export interface Strings {
  /** Sounding open pitches in any order. */
  readonly opens: readonly number[]
  readonly fretsLeft: number
}

/** The third of the strings that sounds lowest is for the thumb, the rest for the melody. */
const thumbStrings = (opens: readonly number[]): readonly number[] => [...opens].sort((a, b) => a - b).slice(0, Math.max(1, Math.floor(opens.length / 3)))

function fitAt(histogram: Histogram, roots: Melody['roots'], shift: number, { opens, fretsLeft }: Strings): Fit {
  const thumb = thumbStrings(opens)
  const melodyLow = Math.min(...opens.filter(open => open > Math.max(...thumb)), Math.max(...opens))
  const top = Math.max(...opens)
  const share = (holds: (midi: number) => boolean) => histogram.reduce((sum, [midi, part]) => (holds(midi + shift) ? sum + part : sum), 0)
  const lowest = histogram[0]![0] + shift
  const bassAt = (chroma: number): 'open' | 'held' | 'wanting' => {
    const root = chromaOf(chroma + shift)
    const below = opens.filter(open => open < lowest)
    if (below.some(open => chromaOf(open) === root)) return 'open'
    return below.some(open => thumb.includes(open) && chromaOf(root - open) <= BASS_FRETS && open + chromaOf(root - open) < lowest) ? 'held' : 'wanting'
  }
  const found = roots.map(each => ({ ...each, chroma: chromaOf(each.chroma + shift), at: bassAt(each.chroma) }))
  const weight = found.reduce((sum, each) => sum + each.weight, 0) || 1
  const pick = (at: string) => found.filter(each => each.at === at).map(each => each.chroma)
  return {
    shift, open: share(midi => opens.includes(midi)), range: share(midi => midi >= melodyLow && midi <= top + Math.min(12, fretsLeft)),
    lost: share(midi => !opens.some(open => midi >= open && midi <= open + fretsLeft)),
    bass: found.reduce((sum, each) => sum + each.weight * ({ open: 1, held: HELD, wanting: 0 }[each.at]), 0) / weight,
    openPitches: histogram.map(([midi]) => midi + shift).filter(midi => opens.includes(midi)),
    openRoots: pick('open'), heldRoots: pick('held'), wantingRoots: pick('wanting'),
  }
}

/** Weights of what the ranking values, 100 in all (ours); a melody that the neck lacks notes for counts accordingly less. */
export const WEIGHTS = { open: 40, range: 20, bass: 20, effort: 10, load: 10 } as const

/** What a fit is worth by itself, 0 to 80. */
export const fitScore = (fit: Fit): number =>
  (WEIGHTS.open * fit.open + WEIGHTS.range * fit.range + WEIGHTS.bass * fit.bass) * (1 - fit.lost)

/** The octave in which the melody, moved by `halfSteps`, lies best. */
export function bestFit(histogram: Histogram, roots: Melody['roots'], halfSteps: number, strings: Strings): Fit {
  return [-24, -12, 0, 12, 24].map(octaves => fitAt(histogram, roots, halfSteps + octaves, strings))
    .reduce((best, each) => (fitScore(each) > fitScore(best) + 1e-9 ? each : best))
}
