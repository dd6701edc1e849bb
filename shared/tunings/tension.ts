import { frequencyOf, midiOfText } from '../score/pitch'
import type { OpenString } from '../score/types'
import { coreInches, unitWeight, type Gauge } from './gauges'

/** Standard gravity in inches per second squared, as the trade's formula rounds it. */
const GRAVITY = 386.4
const MM_PER_INCH = 25.4
const NEWTONS_PER_POUND = 4.4482216

/**
 * Tension in pounds: T = UW·(2·L·f)²/386.4 (Mersenne's law as string makers print it; D'Addario, "String Tension 101").
 * @param scaleLength millimetres
 * @param midi sounding pitch of the whole string, capo off
 * @returns null where the gauge's weight is not known
 */
export function tension(gauge: Gauge, scaleLength: number, midi: number): number | null {
  const weight = unitWeight(gauge.kind, gauge.inches)
  return weight === null ? null : weight * (2 * (scaleLength / MM_PER_INCH) * frequencyOf(midi)) ** 2 / GRAVITY
}

/** Pitch of the string's whole length: a short string's stored pitch sounds from the fret where it starts. */
export const wholeLengthMidi = (open: OpenString): number => midiOfText(open.pitch) - (open.from ?? 0)

/** Least tensile strength of music wire in megapascals by diameter in inches (interwiregroup.com, table after ASTM A228, from ksi). */
const LEAST_STRENGTH: readonly (readonly [inches: number, megapascals: number])[] = [[0.010, 2668], [0.012, 2599], [0.016, 2496], [0.024, 2351]]

/** Least strength of music wire; beyond the table that of its end, which for thinner wire is on the safe side. */
export function leastStrength(inches: number): number {
  const above = LEAST_STRENGTH.findIndex(([diameter]) => diameter >= inches)
  if (above === 0) return LEAST_STRENGTH[0]![1]
  if (above < 0) return LEAST_STRENGTH.at(-1)![1]
  const [[thin, strong], [thick, weak]] = [LEAST_STRENGTH[above - 1]!, LEAST_STRENGTH[above]!]
  return strong + (weak - strong) * Math.log(inches / thin) / Math.log(thick / thin)
}

/** Megapascals in round steel of this diameter under a load in pounds. */
export const stressMegapascals = (pounds: number, inches: number): number =>
  pounds * NEWTONS_PER_POUND / (Math.PI / 4 * (inches * MM_PER_INCH) ** 2)

/** Part of the least strength of its steel that a string carries, 1 = may break; null where the core's diameter is not known. */
export function stressShare(gauge: Gauge, pounds: number): number | null {
  const core = coreInches(gauge)
  return core === null ? null : stressMegapascals(pounds, core) / leastStrength(core)
}
