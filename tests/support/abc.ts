import { ONE, add, fraction, multiply, type Fraction } from '../../shared/score/fraction'
import { midiOf, type Step } from '../../shared/score/pitch'

/**
 * A small reader of ABC (standard 2.1, abcnotation.com) for single melodies: notes, rests, accidentals that hold for the bar,
 * lengths, broken rhythm, ties, triplets, repeats as written. Independent of the product's own formats, so that what was typed
 * can be compared with what is printed. Pitches are staff pitches as ABC means them: C is middle C.
 */
export interface AbcNote {
  /** MIDI number; null for a rest. */
  readonly midi: number | null
  /** In whole notes. */
  readonly length: Fraction
  /** Tied to the next note. */
  readonly tied: boolean
}
export interface AbcBar {
  readonly notes: readonly AbcNote[]
  readonly repeatStart: boolean
  readonly repeatEnd: boolean
}
export interface AbcTune { readonly meter: { readonly beats: number, readonly unit: number }, readonly fifths: number, readonly bars: readonly AbcBar[] }

/** Sharps of the major key on a letter (ABC 2.1, 3.1.14). */
const MAJOR: Readonly<Record<string, number>> = { F: -1, C: 0, G: 1, D: 2, A: 3, E: 4, B: 5 }
const MODES: Readonly<Record<string, number>> = { '': 0, 'maj': 0, 'ion': 0, 'mix': -1, 'dor': -2, 'm': -3, 'min': -3, 'aeo': -3, 'phr': -4, 'loc': -5, 'lyd': 1 }
const SHARP_ORDER = 'FCGDAEB'

function readKey(text: string): number {
  const match = /^([A-G])([#b]?)\s*([A-Za-z]*)/.exec(text.trim())
  if (!match) throw new Error(`no key: ${text}`)
  const name = match[3]!.toLowerCase()
  const mode = MODES[name === 'm' ? 'm' : name.slice(0, 3)]
  if (mode === undefined) throw new Error(`no mode: ${text}`)
  return MAJOR[match[1]!]! + (match[2] === '#' ? 7 : match[2] === 'b' ? -7 : 0) + mode
}

function keyAlter(letter: string, fifths: number): number {
  if (fifths > 0) return SHARP_ORDER.slice(0, fifths).includes(letter) ? 1 : 0
  return SHARP_ORDER.slice(7 + fifths).includes(letter) && fifths < 0 ? -1 : 0
}

const ALTERS: Readonly<Record<string, number>> = { '^^': 2, '^': 1, '=': 0, '_': -1, '__': -2 }

/** "3/2", "/", "//", "3/", "2" (ABC 2.1, 4.3). */
function readLength(text: string): Fraction {
  const match = /^(\d*)(\/*)(\d*)$/.exec(text)!
  const numerator = match[1] ? Number(match[1]) : 1
  const denominator = match[3] ? Number(match[3]) : 2 ** match[2]!.length
  return fraction(numerator, denominator)
}

/** "(3" is three in the time of two (ABC 2.1, 4.13); others by the same table, simple meters. */
const IN_TIME_OF: Readonly<Record<number, number>> = { 2: 3, 3: 2, 4: 3, 6: 2, 8: 3 }

const TOKEN = /(?<bar>:?\|+[\]:]?|\[\||::)|(?<tuplet>\((?<count>\d))|(?<accidental>\^{1,2}|_{1,2}|=)?(?<letter>[A-Ga-gzx])(?<octave>[,']*)(?<length>\d*\/*\d*)(?<tie>-?)|(?<broken>[<>]+)|(?<skip>"[^"]*"|![^!]*!|[\s()~.\\])/y

/** Reads one tune.
 * @throws Error where the text has something else than a melody. */
export function readAbc(text: string): AbcTune {
  const fields = new Map<string, string>()
  const lines: string[] = []
  for (const line of text.split('\n').flatMap(each => each.trim().split(/\s+(?=[A-Z]:)/))) {
    const field = /^([A-Z]):(.*)$/.exec(line)
    if (field) fields.set(field[1]!, field[2]!.trim())
    else if (line) lines.push(line)
  }
  const [beats, unit] = (fields.get('M') ?? '4/4').split('/').map(Number) as [number, number]
  const unitLength = (fields.get('L') ?? '1/8').split('/').map(Number) as [number, number]
  const fifths = readKey(fields.get('K') ?? 'C')
  return { meter: { beats, unit }, fifths, bars: readBars(lines.join(' '), fraction(...unitLength), fifths) }
}

interface OpenBar { notes: AbcNote[], repeatStart: boolean, repeatEnd: boolean }

function readBars(music: string, unit: Fraction, fifths: number): AbcBar[] {
  const bars: OpenBar[] = []
  let bar: OpenBar = { notes: [], repeatStart: false, repeatEnd: false }
  let accidentals = new Map<string, number>()
  let broken: Fraction | null = null
  let tuplet: { left: number, ratio: Fraction } | null = null
  TOKEN.lastIndex = 0
  while (TOKEN.lastIndex < music.length) {
    const at = TOKEN.lastIndex
    const token = TOKEN.exec(music)?.groups
    if (!token) throw new Error(`not understood: “${music.slice(at, at + 12)}”`)
    if (token.bar) {
      bar.repeatEnd = token.bar.startsWith(':')
      if (bar.notes.length) bars.push(bar)
      bar = { notes: [], repeatStart: token.bar.endsWith(':'), repeatEnd: false }
      accidentals = new Map()
    }
    else if (token.tuplet) {
      const count = Number(token.count)
      tuplet = { left: count, ratio: fraction(IN_TIME_OF[count] ?? 2, count) }
    }
    else if (token.broken) {
      // "a>b": the first half as long again, the second halved; "<" the other way (ABC 2.1, 4.4).
      const short = fraction(1, 2 ** token.broken.length)
      const long = fraction(2 ** (token.broken.length + 1) - 1, 2 ** token.broken.length)
      const last = bar.notes.pop()
      if (!last) throw new Error('broken rhythm without a note before it')
      bar.notes.push({ ...last, length: multiply(last.length, token.broken.startsWith('>') ? long : short) })
      broken = token.broken.startsWith('>') ? short : long
    }
    else if (token.letter) {
      const factor: Fraction = multiply(broken ?? ONE, tuplet?.ratio ?? ONE)
      const length = multiply(multiply(unit, readLength(token.length ?? '')), factor)
      bar.notes.push({ midi: readPitch(token, accidentals, fifths), length, tied: token.tie === '-' })
      broken = null
      if (tuplet && --tuplet.left === 0) tuplet = null
    }
  }
  if (bar.notes.length) bars.push(bar)
  return bars
}

function readPitch(token: Readonly<Record<string, string | undefined>>, accidentals: Map<string, number>, fifths: number): number | null {
  const letter = token.letter ?? 'z'
  if (/[zx]/.test(letter)) return null
  const step = letter.toUpperCase() as Step
  const marks = token.octave ?? ''
  const octave = (letter === step ? 4 : 5) + marks.split('\'').length - marks.split(',').length
  // An accidental holds for that note in that octave to the end of the bar (ABC 2.1, 11.3, the default).
  const place = `${step}${octave}`
  if (token.accidental) accidentals.set(place, ALTERS[token.accidental] ?? 0)
  return midiOf({ step, alter: accidentals.get(place) ?? keyAlter(step, fifths), octave })
}

/** Notes of all bars in order as they sound: tied ones joined, rests kept. */
export function soundedNotes(bars: readonly AbcBar[]): { readonly midi: number | null, readonly length: Fraction }[] {
  const result: { midi: number | null, length: Fraction, tied: boolean }[] = []
  for (const note of bars.flatMap(bar => bar.notes)) {
    const last = result.at(-1)
    if (last?.tied && last.midi === note.midi) result[result.length - 1] = { ...note, length: add(last.length, note.length) }
    else result.push({ ...note })
  }
  return result.map(({ midi, length }) => ({ midi, length }))
}

/** O'Neill's Music of Ireland (Chicago, 1903), no. 677, Planxty Irwin (O'Carolan, 1670–1738), from the print; first strain. */
export const PLANXTY_IRWIN_FIRST_STRAIN = `M:6/8 L:1/8 K:D
A|d2c Bcd|A2G FED|G2E FGA|C2D E2c|d2c Bcd|A2G FED|G2E FGA|D2C D2:|`

/** Greensleeves (registered 1580), Chappell's form in Grove's Dictionary of Music and Musicians. */
export const GREENSLEEVES = `M:6/8 L:1/8 K:Em
E|G2A B>cB|A2F D>EF|G2E E>^DE|F2^D B,2E|G2A B>cB|A2F D>EF|G>FE ^D>^C^D|E2E E2||
z|d3 d>^cB|A2F D>EF|G2E E>^DE|F2^D B,3|d3 d>^cB|A2F D>EF|G>FE ^D>^C^D|E3 E3||`

/** New Britain (1829; with "Amazing Grace" 1835), from memory. */
export const NEW_BRITAIN = `M:3/4 L:1/8 K:G
D2|G4BG|B4A2|G4E2|D4D2|G4BG|B4A2|d6-|d4Bd|d4BG|B4A2|G4E2|D4D2|G4BG|B4A2|G6-|G4||`
