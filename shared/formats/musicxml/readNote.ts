import type { XmlElement } from '@rgrove/parse-xml'
import { ZERO, fraction, type Fraction } from '../../score/fraction'
import type { Spelling, Step } from '../../score/pitch'
import type { Base, LinkKind } from '../../score/types'
import { PLAIN_WORDS, type Remarks } from './remarks'
import { BASE_OF_TYPE } from './terms'
import { all, elements, has, numberAt, numberOf, one, textAt } from './tree'

/** A `note` element as it stands, before anything is concluded from it. */
export interface RawNote {
  readonly staff: number
  readonly voice: string
  readonly start: Fraction
  readonly duration: Fraction
  readonly isChord: boolean
  readonly rest: 'none' | 'rest' | 'bar'
  readonly hidden: boolean
  /** As written; null for rests and unpitched notes. */
  readonly written: Spelling | null
  /** Half steps from written to sounding pitch. */
  readonly transpose: number
  readonly type: { readonly base: Base, readonly dots: number } | null
  readonly ratio: RawRatio | null
  readonly tupletStarts: readonly RawTuplet[]
  readonly tupletStops: readonly number[]
  readonly string: number | undefined
  readonly fret: number | undefined
  readonly harmonic: 'none' | 'base' | 'sounding' | 'artificial'
  readonly dead: boolean
  readonly letRing: boolean
  readonly link: LinkKind | undefined
  /** Values of `play/other-play` by their type. */
  readonly own: Readonly<Record<string, string>>
}
export interface RawRatio { readonly actual: number, readonly normal: number, readonly base: Base | undefined }
export interface RawTuplet { readonly level: number, readonly detail: { readonly actual: number, readonly normal: number, readonly base: Base } | null }

export interface NotePlace {
  readonly bar: string
  readonly start: Fraction
  /** Divisions of a quarter. */
  readonly divisions: number
  readonly transpose: (staff: number) => number
}

/** Whole notes of a `duration`; the XSD allows decimals. */
export function durationAt(element: XmlElement, divisions: number): Fraction {
  const duration = numberAt(element, 'duration') ?? 0
  const scale = Number.isInteger(duration) && Number.isInteger(divisions) ? 1 : 10_000
  return duration > 0 ? fraction(Math.round(duration * scale), Math.round(divisions * scale) * 4) : ZERO
}

const STEP = /^[A-G]$/

function spellingAt(note: XmlElement): Spelling | null {
  const pitch = one(note, 'pitch')
  const step = textAt(pitch, 'step')?.trim() ?? ''
  const octave = numberAt(pitch, 'octave')
  if (!STEP.test(step) || octave === undefined) return null
  return { step: step as Step, alter: numberAt(pitch, 'alter') ?? 0, octave }
}

const baseAt = (parent: XmlElement | undefined, ...path: readonly string[]): Base | undefined => BASE_OF_TYPE[textAt(parent, ...path)?.trim() ?? '']

function ratioAt(note: XmlElement): RawRatio | null {
  const modification = one(note, 'time-modification')
  const actual = numberAt(modification, 'actual-notes')
  const normal = numberAt(modification, 'normal-notes')
  return actual && normal ? { actual, normal, base: baseAt(modification, 'normal-type') } : null
}

function tupletDetail(tuplet: XmlElement): RawTuplet['detail'] {
  const actual = numberAt(tuplet, 'tuplet-actual', 'tuplet-number')
  const normal = numberAt(tuplet, 'tuplet-normal', 'tuplet-number')
  const base = baseAt(tuplet, 'tuplet-actual', 'tuplet-type')
  const normalBase = baseAt(tuplet, 'tuplet-normal', 'tuplet-type') ?? base
  if (!actual || !normal || !base || !normalBase) return null
  // "3 eighths in the time of 1 quarter" is 3 in the time of 2 eighths.
  const inBase = normal * base / normalBase
  return Number.isInteger(inBase) ? { actual, normal: inBase, base } : null
}

function harmonicOf(technical: readonly XmlElement[]): RawNote['harmonic'] {
  const harmonic = technical.flatMap(each => all(each, 'harmonic'))[0]
  if (!harmonic) return 'none'
  if (has(harmonic, 'artificial')) return 'artificial'
  return has(harmonic, 'sounding-pitch') ? 'sounding' : 'base'
}

const isStart = (element: XmlElement): boolean => element.attributes.type === 'start'

function linkOf(note: XmlElement, notations: readonly XmlElement[], technical: readonly XmlElement[]): LinkKind | undefined {
  const ties = [...all(note, 'tie'), ...notations.flatMap(each => all(each, 'tied'))]
  if (ties.some(isStart)) return 'tie'
  return (['hammer-on', 'pull-off'] as const).find(kind => technical.some(each => all(each, kind).some(isStart)))
}

const UNDERSTOOD = new Set(['string', 'fret', 'hammer-on', 'pull-off', 'harmonic', 'open-string'])
const SILENT_NOTATIONS = new Set(['tied', 'tuplet', 'technical'])

/** Signs that are not kept are remarked upon. A slur that comes with a hammer-on or pull-off is part of it. */
function remarkNotations(notations: readonly XmlElement[], bar: string, remarks: Remarks): void {
  const leave = (name: string) => remarks.leaveOut(PLAIN_WORDS[name] ?? `“${name}”`, bar)
  const technical = notations.flatMap(each => all(each, 'technical').flatMap(elements))
  const isSlurred = technical.some(each => each.name === 'hammer-on' || each.name === 'pull-off')
  for (const each of notations.flatMap(elements)) {
    if (each.name === 'slur') {
      if (isStart(each) && !isSlurred) leave('slur')
    }
    else if (!SILENT_NOTATIONS.has(each.name)) leave(each.name)
  }
  for (const each of technical) {
    if (!UNDERSTOOD.has(each.name)) leave(each.name)
  }
}

function restOf(note: XmlElement): RawNote['rest'] {
  const rest = one(note, 'rest')
  if (!rest) return 'none'
  return rest.attributes.measure === 'yes' ? 'bar' : 'rest'
}

export function readNote(note: XmlElement, place: NotePlace, remarks: Remarks): RawNote {
  const staff = numberAt(note, 'staff') ?? 1
  const notations = all(note, 'notations')
  const technical = notations.flatMap(each => all(each, 'technical'))
  const base = baseAt(note, 'type')
  remarkNotations(notations, place.bar, remarks)
  if (has(note, 'lyric')) remarks.leaveOut(PLAIN_WORDS.lyric!, place.bar)
  const tuplets = notations.flatMap(each => all(each, 'tuplet'))
  return {
    staff, voice: textAt(note, 'voice')?.trim() ?? '1', start: place.start, duration: durationAt(note, place.divisions),
    isChord: has(note, 'chord'), rest: restOf(note), hidden: note.attributes['print-object'] === 'no',
    written: spellingAt(note), transpose: place.transpose(staff),
    type: base ? { base, dots: all(note, 'dot').length } : null, ratio: ratioAt(note),
    tupletStarts: tuplets.filter(isStart).map(each => ({ level: numberOf(each, 'number') ?? 1, detail: tupletDetail(each) })),
    tupletStops: tuplets.filter(each => each.attributes.type === 'stop').map(each => numberOf(each, 'number') ?? 1),
    string: technical.map(each => numberAt(each, 'string')).find(each => each !== undefined),
    fret: technical.map(each => numberAt(each, 'fret')).find(each => each !== undefined),
    harmonic: harmonicOf(technical), dead: textAt(note, 'notehead')?.trim() === 'x',
    letRing: notations.some(each => all(each, 'tied').some(tied => tied.attributes.type === 'let-ring')),
    link: linkOf(note, notations, technical),
    own: Object.fromEntries(all(one(note, 'play'), 'other-play').map(each => [each.attributes.type ?? '', each.text])),
  }
}
