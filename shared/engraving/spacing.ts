import { compare, fraction, isLess, subtract, toNumber, type Fraction } from '../score/fraction'
import { GAP, HEAD_WIDTH, KEY_ACCIDENTAL_WIDTH, LEAD, MIN_BODY, TAIL, tabTextWidth } from './metrics'
import type { Slice, StaffEvent, TabMark } from './types'

/** Points that a span of time asks for: an eighth 30; twice the time takes about half as much room again (common practice). */
export const idealWidth = (span: Fraction): number => 30 * (8 * toNumber(span)) ** 0.58

interface Column { left: number, right: number }

function staffColumn(events: readonly StaffEvent[], beamed: ReadonlySet<string>): Column {
  let left = 0
  let right = HEAD_WIDTH
  const shown = events.filter(event => !event.hidden)
  const accidentals = shown.flatMap(event => event.notes).filter(note => note.accidental !== null).length
  if (accidentals) left = 3 + Math.min(accidentals, 3) * (KEY_ACCIDENTAL_WIDTH + 1)
  for (const event of shown) {
    const seconds = event.notes.some((note, index) => index > 0 && note.position - event.notes[index - 1]!.position < 2)
    const flag = event.base >= 8 && event.notes.length > 0 && event.stem === 1 && !beamed.has(event.eventId)
    if (seconds && event.stem === -1) left += HEAD_WIDTH
    right = Math.max(right, HEAD_WIDTH + (seconds && event.stem === 1 ? HEAD_WIDTH : 0) + (flag ? 9 : 0) + event.dots * 6 + (event.dots ? 3 : 0))
  }
  // Two voices a second apart, or with different heads on one place, stand beside each other.
  const [upper, lower] = [shown.find(event => event.stem === 1 && event.notes.length), shown.find(event => event.stem === -1 && event.notes.length)]
  if (upper && lower && upper.notes[0]!.position - lower.notes.at(-1)!.position < 2) right += HEAD_WIDTH
  return { left, right }
}

function tabColumn(marks: readonly TabMark[]): Column {
  const centre = HEAD_WIDTH / 2
  const half = Math.max(0, ...marks.map(mark => tabTextWidth(mark.text) / 2))
  return { left: Math.max(0, half - centre), right: centre + half + (marks.some(mark => mark.beside) ? 14 : 0) }
}

/** Columns of a bar, one a moment; `total` is where the longest voice, or the bar, ends. */
export function slicesOf(moments: readonly Fraction[], events: readonly StaffEvent[], tab: readonly TabMark[], beamed: ReadonlySet<string>, total: Fraction): readonly Slice[] {
  return moments.map((at, index) => {
    const staff = staffColumn(events.filter(event => event.slice === index), beamed)
    const frets = tabColumn(tab.filter(mark => mark.slice === index))
    const next = moments[index + 1] ?? total
    return { at, left: Math.max(staff.left, frets.left), right: Math.max(staff.right, frets.right), ideal: isLess(at, next) ? idealWidth(subtract(next, at)) : 0 }
  })
}

/** Least distance from a column's head to what follows it. */
function rod(slices: readonly Slice[], index: number): number {
  const next = slices[index + 1]
  return slices[index]!.right + GAP + (next ? next.left : TAIL)
}

const leading = (slices: readonly Slice[]): number => LEAD + (slices[0]?.left ?? 0)

/** Room kept for the time that an unfinished bar still has to hold, as if quarters were to come. */
function roomFor(missing: Fraction | null): number {
  if (!missing) return 0
  const quarters = Math.floor(4 * toNumber(missing))
  return quarters * idealWidth(fraction(1, 4)) + idealWidth(subtract(missing, fraction(quarters, 4)))
}

/** Width between bar lines that the columns wish for; `missing` is the time that an unfinished bar still has to hold. */
export function bodyWidth(slices: readonly Slice[], missing: Fraction | null): number {
  const room = slices.reduce((width, slice, index) => width + Math.max(slice.ideal, rod(slices, index)), leading(slices))
  return Math.max(MIN_BODY, room + roomFor(missing))
}

export const leastWidth = (slices: readonly Slice[]): number =>
  Math.max(MIN_BODY, slices.reduce((width, _, index) => width + rod(slices, index), leading(slices)))

/**
 * x of each column's head in a bar body of this width. Springs stretch in proportion to their time; a column that needs
 * more than its share keeps it. A body below the least width is squeezed evenly.
 */
export function columnsOf(slices: readonly Slice[], body: number, missing: Fraction | null): readonly number[] {
  if (!slices.length) return []
  const rods = slices.map((_, index) => rod(slices, index))
  const rest = roomFor(missing)
  const available = body - leading(slices)
  const needed = rods.reduce((sum, each) => sum + each, 0)
  const squeeze = Math.min(1, available / needed)
  const widths = squeeze < 1 ? rods.map(each => each * squeeze) : stretched(rods, slices.map(slice => slice.ideal), available, rest)
  let x = leading(slices)
  return widths.map((width) => {
    const here = x
    x += width
    return here
  })
}

/** Widths max(rod, s·ideal) for the one s at which they fill the room; `rest` is a spring behind the last column. */
function stretched(rods: readonly number[], ideals: readonly number[], available: number, rest: number): readonly number[] {
  const isStiff = rods.map(() => false)
  for (;;) {
    const stiff = rods.reduce((sum, each, index) => sum + (isStiff[index] ? each : 0), 0)
    const loose = ideals.reduce((sum, each, index) => sum + (isStiff[index] ? 0 : each), rest)
    const stretch = loose > 0 ? (available - stiff) / loose : 0
    const tight = ideals.findIndex((each, index) => !isStiff[index] && each * stretch < rods[index]!)
    if (tight < 0) return rods.map((each, index) => (isStiff[index] ? each : ideals[index]! * stretch))
    isStiff[tight] = true
  }
}

/** Moments at which anything starts, in order, each once. */
export function momentsOf(starts: readonly Fraction[]): readonly Fraction[] {
  return [...starts].sort(compare).filter((at, index, all) => index === 0 || compare(at, all[index - 1]!) !== 0)
}
