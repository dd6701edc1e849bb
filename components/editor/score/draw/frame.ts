import { CLEF_WIDTH, KEY_ACCIDENTAL_WIDTH, STAFF_HEIGHT, STRING_SPACE, cancelledCount, tabHeight, type PlacedBar, type System } from '#shared/engraving'
import type { Key, Meter, Tempo } from '#shared/score/types'
import { at, glyph, svg, words } from './svg'

/** SMuFL code points. */
const CLEF_8_BELOW = 0xE052
const TAB_CLEF = { 4: 0xE06E, 6: 0xE06D } as const
const NATURAL = 0xE261
const SHARP = 0xE262
const FLAT = 0xE260
const DIGIT = 0xE080
/** Notes of metronome marks, stems up, by their base. */
const METRONOME: Readonly<Record<Tempo['base'], number>> = { 1: 0xECA2, 2: 0xECA3, 4: 0xECA5, 8: 0xECA7, 16: 0xECA9, 32: 0xECAB, 64: 0xECAD }
const METRONOME_DOT = 0xECB7
const BRACKET_TOP = 0xE003
const BRACKET_BOTTOM = 0xE004

/** Staff positions of a signature's accidentals in treble clef, in their order (common practice). */
const SHARPS = [8, 5, 9, 6, 3, 7, 4]
const FLATS = [4, 7, 3, 6, 2, 5, 1]

/** `tempoAt`: y of the line on which metronome marks stand. */
export interface FrameMeasures { readonly strings: number, readonly tabTop: number, readonly tempoAt: number }

const y = (position: number): number => STAFF_HEIGHT - position * 5

function signature(key: Key, cancels: number, x: number): Element[] {
  const old = (cancels > 0 ? SHARPS : FLATS).slice(0, Math.abs(cancels))
  const own = (key.fifths > 0 ? SHARPS : FLATS).slice(0, Math.abs(key.fifths))
  return [...old.map(position => [NATURAL, position] as const), ...own.map(position => [key.fifths > 0 ? SHARP : FLAT, position] as const)]
    .map(([code, position], index) => glyph(code, x + index * KEY_ACCIDENTAL_WIDTH, y(position)))
}

function meterDigits(meter: Meter, x: number): Element[] {
  const number = (value: number): string => String.fromCodePoint(...[...`${value}`].map(digit => DIGIT + Number(digit)))
  return [[meter.beats, 10], [meter.unit, 30]].map(([value, height]) =>
    svg('text', { 'x': at(x), 'y': height!, 'font-family': 'Bravura', 'font-size': 40, 'text-anchor': 'middle' }, number(value!)))
}

/** "♩. = 80" */
function tempoMark({ base, dots, perMinute }: Tempo, x: number, height: number): Element {
  const note = String.fromCodePoint(METRONOME[base], ...Array.from({ length: dots }, () => METRONOME_DOT))
  return svg('text', { x: at(x), y: at(height), class: 'tempo-mark' },
    svg('tspan', { 'font-family': 'Bravura', 'font-size': 19 }, note),
    svg('tspan', { 'font-family': 'Alegreya Sans', 'font-size': 14, 'dx': 4 }, `= ${perMinute}`))
}

function tabClef(strings: number, tabTop: number): Element {
  const code = strings <= 5 ? TAB_CLEF[4] : TAB_CLEF[6]
  const natural = (strings <= 5 ? 3 : 5) * 10
  const height = tabHeight(strings)
  // Bravura's tab clefs are drawn for strings one staff space apart, centred on the middle.
  return glyph(code, 11, tabTop + height / 2, at(40 * Math.min(1.15, height / natural)))
}

function prefix(bar: PlacedBar, measures: FrameMeasures, number: number): Element[] {
  const { role } = bar
  const { strings, tabTop } = measures
  const parts: Element[] = []
  let x = bar.x
  if (role.opens) {
    parts.push(glyph(CLEF_8_BELOW, x + 8, 30), tabClef(strings, tabTop))
    if (number > 0) parts.push(words(`${number}`, x - 1, -21, { 'font-family': 'Alegreya Sans', 'font-size': 12, 'class': 'sheet-soft' }))
    x += CLEF_WIDTH
  }
  const cancelled = cancelledCount(role)
  const accidentals = (role.key ? Math.abs(role.key.fifths) : 0) + cancelled
  if (role.key && accidentals) {
    if (!role.opens) x += 8
    parts.push(...signature(role.key, role.cancels, x))
    x += accidentals * KEY_ACCIDENTAL_WIDTH + 6
  }
  if (role.tempo) parts.push(tempoMark(role.tempo, x + 4, measures.tempoAt))
  if (role.meter) {
    parts.push(...meterDigits(role.meter, x + 11 + (role.opens ? 0 : 5)))
    x += 28
  }
  if (role.repeatStart) parts.push(...repeatSign(x + (role.opens || role.meter ? 2 : 0), 1, measures))
  return parts
}

const line = (x: number, top: number, bottom: number, width: number): Element =>
  svg('path', { 'd': `M${at(x)} ${at(top)}V${at(bottom)}`, 'stroke': 'currentColor', 'stroke-width': width, 'fill': 'none' })

/** Two dots on the staff's and the tab's middle spaces, thick and thin line; `side` 1 opens, −1 closes. */
function repeatSign(x: number, side: 1 | -1, { strings, tabTop }: Pick<FrameMeasures, 'strings' | 'tabTop'>): Element[] {
  const bottom = tabTop + tabHeight(strings)
  const dot = (dy: number): Element => svg('circle', { cx: at(x + side * 9.5), cy: at(dy), r: 2 })
  const middle = tabTop + tabHeight(strings) / 2
  return [line(x + side * 1.5, 0, bottom, 3.2), line(x + side * 5.5, 0, bottom, 1), dot(15), dot(25), dot(middle - STRING_SPACE / 2), dot(middle + STRING_SPACE / 2)]
}

function rightLine(bar: PlacedBar, measures: FrameMeasures): Element[] {
  const x = bar.x + bar.width
  const bottom = measures.tabTop + tabHeight(measures.strings)
  switch (bar.role.right) {
    case 'single': return [line(x - 0.5, 0, bottom, 1)]
    case 'double': return [line(x - 3.5, 0, bottom, 1), line(x - 0.5, 0, bottom, 1)]
    case 'final': return [line(x - 6, 0, bottom, 1), line(x - 1.6, 0, bottom, 3.2)]
    case 'repeat': return repeatSign(x, -1, measures)
  }
}

function bracket(bottom: number): Element[] {
  return [line(-4, -4, bottom + 4, 3), glyph(BRACKET_TOP, -5.5, -4), glyph(BRACKET_BOTTOM, -5.5, bottom + 4), line(0.5, 0, bottom, 1)]
}

/** All of a system that its notes do not touch: staff lines, bracket, clefs, signatures, bar lines and number. */
export function drawFrame(system: System, measures: FrameMeasures, numbers: readonly number[], repeats: readonly (number | undefined)[]): SVGGElement {
  const bottom = measures.tabTop + tabHeight(measures.strings)
  const lines = svg('path', { class: 'sheet-line', fill: 'none', d: [0, 10, 20, 30, 40].map(height => `M0 ${height}H${at(system.width)}`).join('') })
  const counts = system.bars.flatMap((bar, index) => (repeats[index] && repeats[index]! > 2
    ? [words(`${repeats[index]}×`, bar.x + bar.width - 4, -8, { 'font-family': 'Alegreya Sans', 'font-size': 13, 'text-anchor': 'end' })]
    : []))
  return svg('g', {}, lines, ...bracket(bottom), ...system.bars.flatMap((bar, index) => [...prefix(bar, measures, numbers[index] ?? 0), ...rightLine(bar, measures)]), ...counts)
}
