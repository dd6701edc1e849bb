import { fingerDistance, fretDistance } from '#shared/tunings/neck'

/** Pixels from string to string, and above the first. */
export const STRING_GAP = 21
export const TOP = 13

export interface NeckGeometry {
  /** Horizontal place of a fret wire, of a finger, and of a string, as SVG lengths. */
  readonly wire: (fret: number) => string
  readonly finger: (fret: number) => string
  readonly string: (string: number) => number
  /** Of the drawing, with the row of fret numbers. */
  readonly height: number
  /** Of the strings' field. */
  readonly field: number
}

/** Lays the neck over the width there is: true fret spacing, the last fret just inside. For the left-handed the nut is at the right. */
export function neckGeometry(frets: number, strings: number, leftHanded: boolean): NeckGeometry {
  const span = fretDistance(frets) * 1.015
  const across = (distance: number) => `${((leftHanded ? 1 - distance / span : distance / span) * 100).toFixed(3)}%`
  const field = TOP + (strings - 1) * STRING_GAP
  return {
    wire: fret => across(fretDistance(fret)),
    finger: fret => across(fingerDistance(fret)),
    string: string => TOP + (string - 1) * STRING_GAP,
    height: field + 30,
    field,
  }
}

/** Frets that a guitar's neck has a dot at, twelve and twenty-four with two (common practice). */
export const DOTS: readonly number[] = [3, 5, 7, 9, 12, 15, 17, 19, 21, 24]
