import { STANDARD_TUNING, STEEL_STRING_GUITAR } from '../score/create'
import type { OpenString } from '../score/types'
import type { Gauge } from './gauges'
import { tension, wholeLengthMidi } from './tension'

/** A set of strings with the tuning and scale it is made for. */
export interface StringSet {
  readonly name: string
  /** String 1 first, as many as the instrument has. */
  readonly gauges: readonly Gauge[]
  readonly design: readonly OpenString[]
  /** Millimetres. */
  readonly scaleLength: number
  /** Pounds on each string as the instrument is meant to be strung, where gauges of a set were exchanged for others; absent: those of its gauges. */
  readonly designPounds?: readonly number[]
}

const plain = (inches: number): Gauge => ({ kind: 'plain', inches })
const bronze = (inches: number): Gauge => ({ kind: 'bronze', inches })
const forGuitar = (name: string, gauges: readonly Gauge[]): StringSet =>
  ({ name, gauges, design: STANDARD_TUNING, scaleLength: STEEL_STRING_GUITAR.scaleLength })

/** Sets for the steel-string guitar as commonly sold; all gauges are on the maker's chart. */
export const LIGHT_SET = forGuitar('Light, 12 to 53', [plain(0.012), plain(0.016), bronze(0.024), bronze(0.032), bronze(0.042), bronze(0.053)])
export const MEDIUM_SET = forGuitar('Medium, 13 to 56', [plain(0.013), plain(0.017), bronze(0.026), bronze(0.035), bronze(0.045), bronze(0.056)])
export const SETS: readonly StringSet[] = [LIGHT_SET, MEDIUM_SET]

/** The set to reckon with unless a person names their own; null for instruments without six strings. */
export const usualSet = (strings: readonly OpenString[]): StringSet | null =>
  (strings.length === LIGHT_SET.gauges.length ? LIGHT_SET : null)

/** Pounds on each string as the set is meant, string 1 first.
 * @throws RangeError when a gauge's weight is not known */
export function designTensions(set: StringSet): readonly number[] {
  if (set.designPounds) return set.designPounds
  return set.gauges.map((gauge, index) => {
    const pounds = tension(gauge, set.scaleLength, wholeLengthMidi(set.design[index]!))
    if (pounds === null) throw new RangeError(`no weight is known for a ${gauge.kind} string of ${gauge.inches} in`)
    return pounds
  })
}

/** The set with another gauge on one string (1 = first); what each string is meant to carry stays as it was. */
export const withGauge = (set: StringSet, string: number, gauge: Gauge): StringSet =>
  ({ ...set, name: 'Own gauges', gauges: set.gauges.map((each, index) => (index === string - 1 ? gauge : each)), designPounds: designTensions(set) })
