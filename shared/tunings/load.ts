import type { OpenString } from '../score/types'
import { gaugesOf, type Gauge, type SoldGauge, type StringKind } from './gauges'
import { designTensions, type StringSet } from './sets'
import { stressShare, tension, wholeLengthMidi } from './tension'

/** Green: as the set is meant to be strung; amber: it can be borne; red: it may break or harm; slack: it will rattle. */
export type Band = 'green' | 'amber' | 'red' | 'slack'

/** Parts of the set's design tension, and of the least strength of the wire, at which a band ends (ours; two half steps up are 1.26). */
export const CUTS = { slack: 0.65, low: 0.70, high: 1.13, red: 1.27, stressAmber: 0.65, stressRed: 0.75, total: 1.10 } as const

/** @param share of the design tension
 * @param stress part of the wire's least strength, null where it is not known */
export function bandOf(share: number, stress: number | null): Band {
  if (share > CUTS.red || (stress ?? 0) >= CUTS.stressRed) return 'red'
  if (share < CUTS.slack) return 'slack'
  return share < CUTS.low || share > CUTS.high || (stress ?? 0) >= CUTS.stressAmber ? 'amber' : 'green'
}

export interface BetterGauge {
  readonly gauge: SoldGauge
  readonly direction: 'lighter' | 'heavier'
  readonly pounds: number
  /** Of this string's design tension. */
  readonly share: number
}

export interface StringLoad {
  readonly string: number
  readonly gauge: Gauge
  readonly pounds: number
  readonly designPounds: number
  readonly share: number
  /** Part of the least strength of its steel; null: the core of this wound string has not been measured. */
  readonly stress: number | null
  readonly band: Band
  /** The gauge nearest to the design tension that is in the green, where this one is not. */
  readonly better: BetterGauge | null
}

export interface Load {
  readonly set: StringSet
  readonly strings: readonly StringLoad[]
  readonly pounds: number
  readonly designPounds: number
  readonly share: number
  /** Red above 110 percent in all. */
  readonly band: 'green' | 'red'
}

/** A lighter or heavier gauge that brings a string back into the green. Its own kind comes first, then plain or bronze.
 * @param midi what the whole string is to sound */
export function betterGauge(gauge: Gauge, scaleLength: number, midi: number, designPounds: number): BetterGauge | null {
  const current = tension(gauge, scaleLength, midi) ?? 0
  const best = (kind: StringKind): BetterGauge | undefined => gaugesOf(kind).flatMap((each): BetterGauge[] => {
    const pounds = tension(each, scaleLength, midi)
    if (pounds === null || bandOf(pounds / designPounds, stressShare(each, pounds)) !== 'green') return []
    return [{ gauge: each, direction: pounds < current ? 'lighter' : 'heavier', pounds, share: pounds / designPounds }]
  }).sort((a, b) => Math.abs(Math.log(a.share)) - Math.abs(Math.log(b.share)))[0]
  return best(gauge.kind) ?? best(gauge.kind === 'plain' ? 'bronze' : 'plain') ?? null
}

/**
 * What a tuning asks of a set of strings, capo off (a capo adds next to nothing).
 * @param strings string 1 first
 * @param scaleLength millimetres
 * @throws RangeError when the set has another number of strings, or a gauge of unknown weight
 */
export function loadOf(strings: readonly OpenString[], scaleLength: number, set: StringSet): Load {
  if (set.gauges.length !== strings.length) throw new RangeError(`a set of ${set.gauges.length} can't string ${strings.length} strings`)
  const design = designTensions(set)
  const loads = strings.map((open, index): StringLoad => {
    const [gauge, designPounds, midi] = [set.gauges[index]!, design[index]!, wholeLengthMidi(open)]
    const pounds = tension(gauge, scaleLength, midi)!
    const share = pounds / designPounds
    const stress = stressShare(gauge, pounds)
    const band = bandOf(share, stress)
    const better = band === 'green' ? null : betterGauge(gauge, scaleLength, midi, designPounds)
    return { string: index + 1, gauge, pounds, designPounds, share, stress, band, better }
  })
  const pounds = loads.reduce((sum, each) => sum + each.pounds, 0)
  const designPounds = design.reduce((sum, each) => sum + each, 0)
  const share = pounds / designPounds
  return { set, strings: loads, pounds, designPounds, share, band: share > CUTS.total ? 'red' : 'green' }
}

/** Something may break or harm: a string in the red, or all together. */
export const isGrave = (load: Load): boolean => load.band === 'red' || load.strings.some(each => each.band === 'red')
