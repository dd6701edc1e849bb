import type { XmlElement } from '@rgrove/parse-xml'
import { ZERO, add, fraction, isLess, max, subtract, toNumber, type Fraction } from '../../score/fraction'
import { midiOf } from '../../score/pitch'
import type { Key, Meter, Tempo } from '../../score/types'
import { readKey, readMeter, readStaves, readTransposes, transposeOf, type RawStaff, type Transposes } from './attributes'
import { durationScale } from './divisions'
import { durationAt, readNote, type RawNote } from './readNote'
import { PLAIN_WORDS, type Remarks } from './remarks'
import { BASE_OF_TYPE, RING_WORDS } from './terms'
import { all, elements, has, numberAt, numberOf, one, textAt } from './tree'

export interface RawMeasure {
  /** As printed. */
  readonly number: string
  readonly notes: readonly RawNote[]
  /** Where the furthest voice ends. */
  readonly length: Fraction
  readonly keys: readonly { readonly staff: number | undefined, readonly key: Key }[]
  readonly meter: Meter | undefined
  readonly tempo: Tempo | undefined
  readonly repeatStart: boolean
  readonly repeatEnd: number | undefined
  readonly features: Readonly<Record<string, string>>
  readonly staves: readonly RawStaff[]
  readonly transposes: Transposes
}

/** `scale`: how many times longer durations are than the note shapes. */
interface PartState { divisions: number, readonly scale: number, transposes: Transposes }

/** A metronome mark of a note and a number; else the bare tempo for players, in quarters. */
function readTempo(element: XmlElement): Tempo | null {
  const metronome = all(element, 'direction-type').map(each => one(each, 'metronome')).find(each => each !== undefined)
  const perMinute = numberAt(metronome, 'per-minute')
  const base = BASE_OF_TYPE[textAt(metronome, 'beat-unit')?.trim() ?? '']
  const tempo = perMinute && base
    ? { base, dots: all(metronome, 'beat-unit-dot').length, perMinute }
    : { base: 4 as const, dots: 0, perMinute: numberOf(element.name === 'sound' ? element : one(element, 'sound') ?? element, 'tempo') ?? 0 }
  return tempo.perMinute >= 10 && tempo.perMinute <= 400 ? tempo : null
}

const SILENT_DIRECTIONS = new Set(['metronome', 'scordatura'])

function remarkDirection(direction: XmlElement, bar: string, remarks: Remarks): void {
  for (const each of all(direction, 'direction-type').flatMap(elements)) {
    if (SILENT_DIRECTIONS.has(each.name) || (each.name === 'words' && isKnownWords(each.text))) continue
    remarks.leaveOut(PLAIN_WORDS[each.name] ?? `“${each.name}”`, bar)
  }
}

const ringWords: readonly string[] = [...Object.values(RING_WORDS), `${RING_WORDS['let-ring']} throughout`]
/** Words that say what the score holds elsewhere are not missed. */
const isKnownWords = (words: string): boolean => ringWords.includes(words) || /^(?:Standard tuning|Tuning) [A-G][♯♭]*\d/.test(words)

const SILENT = new Set(['print', 'listening', 'bookmark', 'link'])

/** All bars of a part, read for what they say and nothing concluded. */
export function readMeasures(part: XmlElement, remarks: Remarks): RawMeasure[] {
  const scale = toNumber(durationScale(part))
  if (scale !== 1) remarks.say('The durations in the file do not fit its note shapes. The shapes were followed.')
  const state: PartState = { divisions: scale, scale, transposes: new Map() }
  return all(part, 'measure').map((measure, index) => readMeasure(measure, index, state, remarks))
}

interface Draft {
  number: string
  notes: RawNote[]
  length: Fraction
  keys: { staff: number | undefined, key: Key }[]
  meter: Meter | undefined
  tempo: Tempo | undefined
  repeatStart: boolean
  repeatEnd: number | undefined
  features: Record<string, string>
  staves: RawStaff[]
  transposes: Transposes
}

function readMeasure(measure: XmlElement, index: number, state: PartState, remarks: Remarks): RawMeasure {
  const bar: Draft = {
    number: measure.attributes.number ?? String(index + 1), notes: [], length: ZERO, keys: [], meter: undefined, tempo: undefined,
    repeatStart: false, repeatEnd: undefined, features: {}, staves: [], transposes: state.transposes,
  }
  let at = ZERO
  let chordAt = ZERO
  for (const element of elements(measure)) {
    switch (element.name) {
      case 'note': {
        const isChord = has(element, 'chord')
        addNote(element, isChord ? chordAt : at, bar, state, remarks)
        if (!isChord && !has(element, 'grace')) {
          chordAt = at
          at = add(at, durationAt(element, state.divisions))
        }
        break
      }
      case 'backup':
        at = max(ZERO, subtract(at, durationAt(element, state.divisions)))
        break
      case 'forward':
        at = add(at, durationAt(element, state.divisions))
        break
      default:
        readOther(element, at, bar, state, remarks)
    }
    bar.length = max(bar.length, at)
  }
  bar.transposes = state.transposes
  return bar
}

/** What takes no time. */
function readOther(element: XmlElement, at: Fraction, bar: Draft, state: PartState, remarks: Remarks): void {
  switch (element.name) {
    case 'attributes': return readAttributes(element, bar, state, remarks)
    case 'direction':
      remarkDirection(element, bar.number, remarks)
      return addTempo(element, at, bar, remarks)
    case 'sound': return addTempo(element, at, bar, remarks)
    case 'barline': return readBarline(element, bar, remarks)
    case 'grouping':
      for (const feature of all(element, 'feature')) bar.features[feature.attributes.type ?? ''] = feature.text
      return
    default: if (!SILENT.has(element.name)) remarks.leaveOut(PLAIN_WORDS[element.name] ?? `“${element.name}”`, bar.number)
  }
}

function readAttributes(attributes: XmlElement, bar: Draft, state: PartState, remarks: Remarks): void {
  const divisions = numberAt(attributes, 'divisions')
  if (divisions) state.divisions = divisions * state.scale
  state.transposes = readTransposes(attributes, state.transposes)
  for (const each of all(attributes, 'key')) {
    const key = readKey(each)
    if (key) bar.keys.push({ staff: numberOf(each, 'number'), key })
    else remarks.leaveOut('a key signature of its own kind', bar.number)
  }
  for (const each of all(attributes, 'time')) {
    const meter = readMeter(each)
    if (meter) bar.meter = meter
    else remarks.leaveOut('a free or unusual meter', bar.number)
  }
  bar.staves.push(...readStaves(attributes))
  if (has(attributes, 'measure-style')) remarks.leaveOut(PLAIN_WORDS['measure-style']!, bar.number)
}

function addNote(element: XmlElement, start: Fraction, bar: Draft, state: PartState, remarks: Remarks): void {
  if (has(element, 'grace') || has(element, 'cue')) return remarks.leaveOut(has(element, 'grace') ? 'grace notes' : 'cue notes', bar.number)
  const transpose = (staff: number) => transposeOf(state.transposes, staff)
  bar.notes.push(readNote(element, { bar: bar.number, start, divisions: state.divisions, transpose }, remarks))
}

function addTempo(element: XmlElement, at: Fraction, bar: Draft, remarks: Remarks): void {
  const tempo = readTempo(element)
  if (!tempo) return
  if (isLess(ZERO, at)) remarks.count('A change of tempo inside a bar now stands at its beginning ({bars}).', bar.number)
  // A mark of note and number says more than a bare tempo for players.
  if (!bar.tempo || element.name === 'direction') bar.tempo = tempo
}

function readBarline(barline: XmlElement, bar: Draft, remarks: Remarks): void {
  for (const each of elements(barline)) {
    if (each.name === 'repeat') {
      if (each.attributes.direction === 'forward') bar.repeatStart = true
      else bar.repeatEnd = Math.min(99, Math.max(2, numberOf(each, 'times') ?? 2))
    }
    else if (each.name !== 'bar-style') remarks.leaveOut(PLAIN_WORDS[each.name] ?? `“${each.name}”`, bar.number)
  }
}

/** Sounding pitch that the file states; null for rests and unpitched notes. Quarter tones are rounded. */
export const statedMidi = (note: RawNote): number | null => (note.written ? Math.round(midiOf(note.written) + note.transpose) : null)

export const fractionOfText = (text: string): Fraction | null => {
  const match = /^(\d+)\/(\d+)$/.exec(text)
  return match && Number(match[2]) > 0 ? fraction(Number(match[1]), Number(match[2])) : null
}
