/**
 * Measures of the drawing, in points of the sheet: the space between two staff lines is 10. The staff's top line is y = 0.
 * Glyph widths are those of Bravura's metadata (SMuFL 1.40: noteheadBlack 1.18, gClef8vb 2.684, accidentalSharp 0.996 … staff spaces).
 */
export const STAFF_SPACE = 10
export const STAFF_HEIGHT = 4 * STAFF_SPACE
export const STRING_SPACE = 13
export const HEAD_WIDTH = 11.8
export const STEM_LENGTH = 35

/** From a bar line (or what stands behind it) to the first notehead. */
export const LEAD = 16
/** Least room between the last event of a bar and the bar line, where the open end of a voice lies. */
export const TAIL = 19
/** Least room between two columns. */
export const GAP = 4

export const CLEF_WIDTH = 42
export const KEY_ACCIDENTAL_WIDTH = 9.5
export const METER_WIDTH = 28
export const REPEAT_WIDTH = 14
/** The narrowest bar that a cursor can stand in. */
export const MIN_BODY = 56

/** A voice's lanes below the tab. */
export const LANE_SPACE = 4.6
export const LANES_TOP = 9

export const tabHeight = (strings: number): number => (strings - 1) * STRING_SPACE
export const lanesHeight = (strings: number): number => LANES_TOP + strings * LANE_SPACE

/** y of a staff position: 0 is the bottom line, each step up is half a space. */
export const yOfPosition = (position: number): number => STAFF_HEIGHT - position * STAFF_SPACE / 2

/** Width of tab text set at 14.5 points: digits of Alegreya Sans are 0.5 em wide, brackets likewise (measured in the font). */
export const tabTextWidth = (text: string): number => text.length * 7.4
