import type { Ear, Partial } from './partials'

/** Partials of a stiff string: partial n sounds n · f · √(1 + B n²) (N. Fletcher and T. Rossing, The Physics of Musical
 * Instruments, 2nd ed. 1998, §2.18). What is tuned is the first of them, as heard. */
export interface Series {
  /** Hertz of the first partial. */
  readonly first: number
  /** B. */
  readonly stretch: number
  readonly partials: readonly Partial[]
}

const MOST_PARTIALS = 8
/** Beyond this no string is playable (ours; guitar strings lie between 0.00002 and 0.0003). */
const MOST_STRETCH = 0.002
/** Partials this much weaker than the strongest add nothing but noise (ours, 46 dB). */
const FAINT = 2.5e-5
/** A partial is there when it stands this far above the noise between the partials. */
const STANDS_OUT = 12

/** Noise power between partials: where a quarter of the pitch would have its. */
export function noiseBetween(ear: Ear, hertz: number): number {
  const between = [1.25, 1.75, 2.25, 2.75, 3.25].map(times => ear.power(times * hertz)).sort((a, b) => a - b)
  return between[2]! + 1e-14
}

/** Cents beside the line from which a partial counts for half. */
const OFF = 3
/** How far real partials stray from the law, as a part of their frequency (ours, a third of a cent). */
const STRAY = 2e-4
/** What strings have before anything is heard, and how widely it varies. */
const USUAL_STRETCH = 1e-4
const STRETCH_VARIES = 2e-4

/** Certainty of (f/n)² as a part of itself: the phase of a weak partial is moved by noise. */
function certainty({ hertz, power }: Partial, noise: number, reach: number): number {
  const moved = Math.sqrt(noise / power) * reach / Math.PI / hertz
  return 1 / (4 * (moved ** 2 + STRAY ** 2))
}

/** Fits a line through (f/n)² over n², each partial by its certainty and the slope held near the usual; what lies off the line, another
 * string's, comes to weigh little. */
function fit(partials: readonly Partial[], rough: number, noise: number, reach: number): { first: number, stretch: number } {
  const sure = partials.map(partial => certainty(partial, noise, reach))
  let weights = sure
  let [base, slope] = [1, USUAL_STRETCH]
  for (let round = 0; round < 4; round++) {
    const usual = 1 / STRETCH_VARIES ** 2
    let [w, x, y, xx, xy] = [0, 0, 0, usual, usual * USUAL_STRETCH]
    partials.forEach(({ number, hertz }, index) => {
      const [weight, square, value] = [weights[index]!, number ** 2, (hertz / number / rough) ** 2]
      w += weight
      x += weight * square
      y += weight * value
      xx += weight * square * square
      xy += weight * square * value
    })
    slope = Math.min(Math.max((w * xy - x * y) / (w * xx - x * x), 0), MOST_STRETCH)
    base = (y - slope * x) / w
    weights = partials.map(({ number, hertz }, index) => {
      const off = 1200 * Math.log2(hertz / number / rough / Math.sqrt(base + slope * number ** 2))
      return sure[index]! / (1 + (off / OFF) ** 2)
    })
  }
  return { first: rough * Math.sqrt(base + slope), stretch: slope / base }
}

/** Follows a string's partials upward from a rough pitch. Null where none stands out of the noise.
 * @param highest hertz above which nothing is sought */
export function measureSeries(ear: Ear, rough: number, highest: number): Series | null {
  const noise = noiseBetween(ear, rough)
  const partials: Partial[] = []
  let strongest = 0
  let model = { first: rough, stretch: 0 }
  for (let number = 1; number <= MOST_PARTIALS; number++) {
    const expected = number * model.first * Math.sqrt((1 + model.stretch * number ** 2) / (1 + model.stretch))
    if (expected > highest) break
    const near = ear.sine(expected)
    const found = ear.sine(near.hertz)
    const isNear = Math.abs(found.hertz - expected) < Math.min(0.3 * rough, ear.reach)
    strongest = Math.max(strongest, found.power)
    if (!isNear || found.power < STANDS_OUT * noise || found.power < FAINT * strongest) continue
    partials.push({ number, ...found })
    model = fit(partials, rough, noise, ear.reach)
  }
  return partials.length ? { ...model, partials } : null
}
