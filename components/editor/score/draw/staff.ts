import { HEAD_WIDTH, STAFF_HEIGHT, yOfPosition, type BarNotation, type StaffEvent } from '#shared/engraving'
import type { BoundingBox, SVGContext, Stave, StaveNote } from 'vexflow/core'
import type { Vex } from './library'
import { withQuickClones } from './quick'
import { arc, svg } from './svg'

/** The library with what every drawing shares. */
export interface Pen {
  readonly vex: Vex
  readonly context: SVGContext
  readonly stave: Stave
  readonly nowhere: BoundingBox
}

/** A head as ties and slurs meet it. */
export interface Head {
  readonly left: number
  readonly right: number
  readonly y: number
  readonly stem: 1 | -1
  /** y at which the stem ends, or its beam lies. */
  readonly tip: number
}

export interface StaffDrawing { readonly group: SVGGElement, readonly heads: ReadonlyMap<string, Head> }

export function createPen(vex: Vex): Pen {
  const context = new vex.SVGContext(document.createElement('div'))
  // Rectangles for the pointer are not needed, as geometry tells what is clicked; nor is a group for every head and stem.
  context.pointerRect = () => context
  const parents: SVGGElement[] = []
  context.openGroup = (name) => {
    parents.push(context.parent)
    if (name === 'stavenote') context.parent = context.parent.appendChild(svg('g'))
    return context.parent
  }
  context.closeGroup = () => {
    context.parent = parents.pop()!
  }
  const stave = new vex.Stave(0, -STAFF_HEIGHT, 100, { leftBar: false, rightBar: false })
  stave.setContext(context)
  // A note's x then is its column's.
  stave.setNoteStartX(-vex.Metrics.get('Stave.padding', 0))
  stave.setDefaultLedgerLineStyle({ strokeStyle: 'currentColor', lineWidth: 1.3 })
  return { vex, context, stave, nowhere: new vex.BoundingBox(0, 0, 0, 0) }
}

const MAX_SLOPE = 0.15

const ACCIDENTAL: Readonly<Record<number, string>> = { [-2]: 'bb', [-1]: 'b', 0: 'n', 1: '#', 2: '##' }
const LETTERS = 'cdefgab'
/** The written pitch at a staff position, as VexFlow names it; 0 is the bottom line, E4. */
function stepAt(position: number): string {
  const steps = position + 4 * LETTERS.length + LETTERS.indexOf('e')
  return `${LETTERS[steps % LETTERS.length]}/${Math.floor(steps / LETTERS.length)}`
}

function headCode(event: StaffEvent, head: string): string {
  const filling = event.base === 1 ? 0 : event.base === 2 ? 1 : 2
  return head === 'diamond' ? `/D${filling}` : head === 'cross' ? `/X${filling}` : ''
}

function staveNote({ vex, nowhere }: Pen, event: StaffEvent): StaveNote {
  const isRest = event.notes.length === 0
  // A whole rest hangs from the line above the one that other rests stand on.
  const rest = stepAt(event.restPosition + (event.base === 1 && event.restPosition === 4 ? 2 : 0))
  const note = new vex.StaveNote({
    keys: isRest ? [rest] : event.notes.map(each => `${each.step.toLowerCase()}/${each.octave}${headCode(event, each.head)}`),
    duration: `${event.base}`, dots: event.dots, ...(isRest && { type: 'r' }), stemDirection: event.stem,
  })
  // Only those rectangles ask for it, and it measures every part.
  note.getBoundingBox = () => nowhere
  event.notes.forEach(({ accidental }, index) => {
    if (accidental !== null) note.addModifier(new vex.Accidental(ACCIDENTAL[accidental]!), index)
  })
  for (let dot = 0; dot < event.dots; dot++) vex.Dot.buildAndAttach([note], { all: true })
  return note
}

/** Voices of one column share accidentals, dots and room beside each other. */
function setColumn(pen: Pen, notes: readonly StaveNote[], x: number): void {
  const modifiers = new pen.vex.ModifierContext()
  const column = new pen.vex.TickContext()
  notes.forEach((note, voice) => {
    note.setStave(pen.stave)
    note.addToModifierContext(modifiers)
    column.addTickable(note, voice)
  })
  column.preFormat()
  column.setX(x)
}

/** Draws the notes, rests, beams and tuplets of a bar at the columns' x. The colour is the text colour of the place it stands in. */
export const drawStaff = (pen: Pen, notation: BarNotation, columns: readonly number[]): StaffDrawing => withQuickClones(() => draw(pen, notation, columns))

/** The library writes only what differs from its root's attributes; the group stands for that root, in the sheet's own colour. */
function draw(pen: Pen, notation: BarNotation, columns: readonly number[]): StaffDrawing {
  const { vex, context } = pen
  const shown = notation.events.filter(event => !event.hidden)
  const notes = new Map(shown.map(event => [event.eventId, staveNote(pen, event)]))
  columns.forEach((x, slice) => {
    const here = shown.filter(event => event.slice === slice).map(event => notes.get(event.eventId)!)
    if (here.length) setColumn(pen, here, x)
  })
  const beams = notation.beams.map(({ eventIds, breaks }) => {
    const beam = new vex.Beam(eventIds.map(id => notes.get(id)!))
    beam.breakSecondaryAt([...breaks])
    // Slants stay within a space or so (Gould, Behind Bars, beam slants).
    Object.assign(beam.renderOptions, { maxSlope: MAX_SLOPE, minSlope: -MAX_SLOPE })
    return beam
  })
  const group = svg('g', { 'fill': 'currentColor', 'stroke': 'currentColor', 'stroke-width': 1, 'font-family': 'Bravura' })
  context.parent = group
  for (const note of notes.values()) note.setContext(context).drawWithStyle()
  for (const beam of beams) beam.setContext(context).drawWithStyle()
  for (const tuplet of notation.tuplets) {
    const members = tuplet.eventIds.flatMap(id => notes.get(id) ?? [])
    if (members.length) new vex.Tuplet(members, { numNotes: tuplet.actual, notesOccupied: tuplet.normal, bracketed: tuplet.bracket, ratioed: false, location: tuplet.above ? 1 : -1 }).setContext(context).drawWithStyle()
  }
  group.append(...letRingMarks(shown, notes))
  return { group, heads: headsOf(shown, notes) }
}

/** An open tie behind a head that rings on. */
function letRingMarks(events: readonly StaffEvent[], notes: ReadonlyMap<string, StaveNote>): readonly SVGPathElement[] {
  return events.flatMap(event => event.notes.filter(note => note.letRing).map((note) => {
    const left = notes.get(event.eventId)!.getNoteHeadBeginX() + HEAD_WIDTH + 3
    const side = event.stem === 1 ? 1 : -1
    const y = yOfPosition(note.position) + 3 * side
    return arc(left, y, left + 15, y, side)
  }))
}

function headsOf(events: readonly StaffEvent[], notes: ReadonlyMap<string, StaveNote>): ReadonlyMap<string, Head> {
  return new Map(events.flatMap((event) => {
    if (!event.notes.length) return []
    const drawn = notes.get(event.eventId)!
    const left = drawn.getNoteHeadBeginX()
    const tip = event.base === 1 ? yOfPosition(event.notes[0]!.position) : drawn.getStemExtents().topY
    return event.notes.map((note): [string, Head] => [note.noteId, { left, right: left + HEAD_WIDTH, y: yOfPosition(note.position), stem: event.stem, tip }])
  }))
}
