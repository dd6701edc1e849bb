import { XmlElement } from '@rgrove/parse-xml'
import { DEFAULT_KEY, DEFAULT_METER } from '../../score/context'
import { ZERO, equals, fraction, isLess, toNumber, type Fraction } from '../../score/fraction'
import { capoOffset, raisedKey } from '../../score/sounding'
import { MOST_BARS } from '../../score/schema'
import { meterLength } from '../../score/time'
import { VOICE_NAMES, type Bar, type Head, type Key, type Meter, type RingRule, type Score, type Voices, type VoiceName } from '../../score/types'
import { validateScore } from '../../score/validate'
import { shapeProblem } from '../saved'
import { isOwn, pitchRule, readHead, unstatedOf, type PitchRule } from './readHead'
import { transposeOf } from './attributes'
import { fractionOfText, readMeasures, statedMidi, type RawMeasure } from './readMeasures'
import type { RawNote } from './readNote'
import { readVoice } from './readVoice'
import { createRemarks, type Remarks } from './remarks'
import { chooseSources, notesOf, remarkRetuning, type RawPart, type Sources } from './source'
import { FEATURE, TAB_VOICE_OFFSET, VOICE_NUMBERS } from './terms'
import { all, one, parseTree, textAt } from './tree'

export interface ReadMusicXml { readonly score: Score, readonly remarks: string[] }

/**
 * Reads MusicXML: a tab staff with or without notation beside it (in the same part or another), else the first staff with
 * notes, which are then placed at the lowest frets. Never throws; `remarks` says what was left out or concluded, with bars.
 * @param newId makes ids; without it they count from m-1
 */
export function readMusicXml(text: string, newId: () => string = counter()): ReadMusicXml | { readonly problem: string } {
  const tree = parseTree(text)
  if ('problem' in tree) return tree
  try {
    return readScore(tree.root, newId)
  }
  catch (error) {
    // Exact time refuses what leaves whole numbers; only absurd durations get there.
    if (error instanceof RangeError) return { problem: `The lengths in this file can’t be computed (${error.message}). Export it again with ordinary divisions.` }
    throw error
  }
}

function counter(): () => string {
  let count = 0
  return () => `m-${++count}`
}

function readScore(root: XmlElement, newId: () => string): ReadMusicXml | { readonly problem: string } {
  const partElements = partsOf(root)
  if ('problem' in partElements) return partElements
  const remarks = createRemarks()
  const parts = readParts(root, partElements.parts)
  const sources = chooseSources(parts.map(({ part }) => part))
  if (!sources) return { problem: 'There are no notes in this file.' }
  for (const other of sources.others) remarks.say(`Left out: ${other.part.name}, staff ${other.staff}.`)
  const { measures } = sources.music.part
  if (measures.length > MOST_BARS) return { problem: `The file has ${measures.length} bars; an arrangement here has ${MOST_BARS} at most.` }
  const highest = Math.max(0, ...measures.flatMap(measure => notesOf(sources.music, measure)).map(note => note.fret ?? 0))
  const head = readHead(root, sources.tab, highest, remarks)
  if ('problem' in head) return head
  remarkRetuning(sources, remarks)
  const ownFile = isOwn(root)
  const rule = pitchRule(head, measures, sources.music.staff, ownFile ? createRemarks() : remarks)
  const score = { head, bars: readBars({ sources, head, rule, ownFile, unstated: unstatedOf(root), newId, remarks }) }
  const problem = validateScore(score) ?? shapeProblem(score)
  if (problem) return { problem: `The file can’t be read as an arrangement: ${problem}` }
  // Only what is read is remarked upon bar by bar; other parts are named once, above.
  const ofParts = parts.filter(({ part }) => part === sources.music.part || part === sources.notation?.part).flatMap(each => each.remarks.list())
  return { score, remarks: [...new Set([...remarks.list(), ...ofParts])] }
}

interface ReadPart { readonly part: RawPart, readonly remarks: Remarks }

function readParts(root: XmlElement, elements: readonly XmlElement[]): ReadPart[] {
  const names = new Map(all(one(root, 'part-list'), 'score-part').map(each => [each.attributes.id, textAt(each, 'part-name')?.trim()]))
  return elements.map((element, index) => {
    const remarks = createRemarks()
    return { remarks, part: { name: names.get(element.attributes.id) || `part ${index + 1}`, measures: readMeasures(element, remarks) } }
  })
}

/** Parts of measures; a score of measures of parts is turned round. */
function partsOf(root: XmlElement): { readonly parts: readonly XmlElement[] } | { readonly problem: string } {
  if (root.name === 'score-partwise') return { parts: all(root, 'part') }
  if (root.name !== 'score-timewise') {
    return { problem: `The file’s outermost element is <${root.name}>; a MusicXML score begins with <score-partwise>. Choose the score itself, exported as MusicXML.` }
  }
  const byId = new Map<string, XmlElement[]>()
  for (const measure of all(root, 'measure')) {
    for (const part of all(measure, 'part')) {
      const id = part.attributes.id ?? ''
      byId.set(id, [...(byId.get(id) ?? []), new XmlElement('measure', measure.attributes, part.children)])
    }
  }
  return { parts: [...byId].map(([id, measures]) => new XmlElement('part', { id }, measures)) }
}

interface BarsContext {
  readonly sources: Sources
  readonly head: Head
  readonly rule: PitchRule
  readonly ownFile: boolean
  readonly unstated: readonly string[]
  readonly newId: () => string
  readonly remarks: Remarks
}

/** Which of our voices a voice of the file is. Own files say; others count up over the whole piece. */
function voiceNames({ sources, ownFile, remarks }: BarsContext): (note: RawNote) => VoiceName | null {
  if (ownFile) {
    const byNumber = new Map(VOICE_NAMES.map(name => [String(VOICE_NUMBERS[name] + TAB_VOICE_OFFSET), name]))
    return note => byNumber.get(note.voice) ?? null
  }
  const labels = new Set(sources.music.part.measures.flatMap(measure => notesOf(sources.music, measure)).filter(note => note.rest !== 'bar').map(note => note.voice))
  const sorted = [...labels].sort((a, b) => a.localeCompare(b, 'en', { numeric: true }))
  if (sorted.length > VOICE_NAMES.length) remarks.say(`Left out: voices beyond the third (${sorted.slice(VOICE_NAMES.length).join(', ')}).`)
  const byLabel = new Map(sorted.flatMap((label, index) => (VOICE_NAMES[index] ? [[label, VOICE_NAMES[index]] as const] : [])))
  return note => byLabel.get(note.voice) ?? null
}

function readBars(context: BarsContext): Bar[] {
  const { sources, head, rule, unstated, newId, remarks } = context
  const nameOf = voiceNames(context)
  const keyStaff = (sources.notation ?? sources.music).staff
  const keyShift = keyShiftOf(context)
  let meter: Meter = DEFAULT_METER
  let key: Key = DEFAULT_KEY
  return sources.music.part.measures.map((measure, index) => {
    const stated = keyOf(sources.notation?.part.measures[index] ?? measure, keyStaff) ?? keyOf(measure, sources.music.staff)
    const ownKey = stated && raisedKey(stated, keyShift)
    meter = measure.meter ?? meter
    key = ownKey ?? key
    const beside = besideOf(sources, index)
    const voices: { [name in VoiceName]?: Voices[name] } = {}
    const notes = notesOf(sources.music, measure)
    for (const name of VOICE_NAMES) {
      const voice = readVoice(notes.filter(note => nameOf(note) === name), {
        head, key, bar: measure.number, rule, beside, keepsSpelling: keyShift === 0, newId, remarks,
      })
      if (voice) voices[name] = voice
    }
    const isFirst = index === 0
    const bar = barOf(measure, voices, meter, context)
    return {
      ...bar,
      ...(measure.meter && !(isFirst && unstated.includes('meter')) && { meter: measure.meter }),
      ...(ownKey && !(isFirst && unstated.includes('key')) && { key: ownKey }),
    }
  })
}

const keyOf = (measure: RawMeasure, staff: number): Key | undefined =>
  (measure.keys.find(each => each.staff === staff) ?? measure.keys.find(each => each.staff === undefined))?.key

/** Half steps from the file's key to the key as if there were no capo: none where the notation is transposed by the capo. */
function keyShiftOf({ sources, head, rule }: BarsContext): number {
  const { part, staff } = sources.notation ?? sources.music
  const [opening] = part.measures
  const transpose = opening ? transposeOf(opening.transposes, staff) : 0
  const capo = rule === 'without-capo' ? 0 : capoOffset(head)
  return ((transpose - capo) % 12 + 12) % 12
}

/** Finds the note of the same time and sounding pitch on the notation staff, each once. */
function besideOf({ music, notation }: Sources, index: number): (note: RawNote) => RawNote | undefined {
  if (!notation) return note => note
  const waiting = new Map<string, RawNote[]>()
  const keyOfNote = (note: RawNote) => `${toNumber(note.start)} ${statedMidi(note)}`
  const measure = notation.part.measures[index]
  for (const note of measure ? notesOf(notation, measure) : []) {
    const same = waiting.get(keyOfNote(note))
    if (same) same.push(note)
    else waiting.set(keyOfNote(note), [note])
  }
  return note => (note.staff === music.staff ? waiting.get(keyOfNote(note))?.shift() : undefined)
}

const ringOf = (text: string | undefined): RingRule | undefined => (text === 'let-ring' || text === 'written' ? text : undefined)

/** A bar may be meant to hold eight whole notes; what is longer, as a cadenza, reads as an overfull bar. */
const LONGEST_BAR = fraction(8)

/** The bar's own length where it is not the meter's. */
function lengthOfBar(measure: RawMeasure, meter: Meter, remarks: Remarks): Fraction | undefined {
  const stated = measure.features[FEATURE.length]
  if (stated !== undefined) return fractionOfText(stated) ?? undefined
  if (equals(measure.length, ZERO) || equals(measure.length, meterLength(meter))) return undefined
  if (!isLess(LONGEST_BAR, measure.length)) return measure.length
  remarks.count('Longer than eight whole notes, and so more than its meter holds: {bars}.', measure.number)
  return undefined
}

function barOf(measure: RawMeasure, voices: Voices, meter: Meter, { newId, remarks }: BarsContext): Bar {
  const length = lengthOfBar(measure, meter, remarks)
  const ring = ringOf(measure.features[FEATURE.ring])
  return {
    id: newId(), voices,
    ...(measure.tempo && { tempo: measure.tempo }), ...(length && { length }),
    ...(measure.repeatStart && { repeatStart: true }), ...(measure.repeatEnd && { repeatEnd: measure.repeatEnd }),
    ...(ring && { ring }),
  }
}
