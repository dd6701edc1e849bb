import { DEFAULT_KEY, DEFAULT_METER, contextsOf, type Context } from '../../score/context'
import { barPlaces } from '../../score/numbers'
import { fifthsOf, parsePitch, STEPS, type Spelling } from '../../score/pitch'
import { capoOffset, raisedKey } from '../../score/sounding'
import { STANDARD_TUNING } from '../../score/create'
import type { Bar, Head, Key, Meter, Score } from '../../score/types'
import { changedStrings, scoreStatement } from '../statement'
import { linksOf } from './links'
import { planOf } from './plan'
import { FIELD, RING_WORDS, SOFTWARE, caposText, isPlainSetup, staffTuning, stringsText } from './terms'
import { createBarPieces, wordsXml, writeBar } from './writeBar'
import { around, empty, leaf } from './xml'

/**
 * MusicXML 4.0: one part of two staves. Staff 1 is the notation, a plain G clef with pitches an octave above sound and a
 * `transpose`; staff 2 an `alternate` tab staff of the same notes at sounding pitch with string and fret, so that
 * tuning + capo + fret is the pitch (XSD: staff-type, staff-tuning, capo; W3C example of the staff-type element).
 */

export interface WriteOptions {
  /** The day of writing, YYYY-MM-DD; left out without it. */
  readonly date?: string
}

/** @throws RangeError when lengths are too fine to share whole-numbered divisions. */
export function writeMusicXml(score: Score, options: WriteOptions = {}): string {
  const contexts = contextsOf(score)
  const links = linksOf(score)
  const plan = planOf(score, contexts)
  const pieces = createBarPieces()
  const numbers = measureNumbers(score)
  const out: string[] = [
    '<?xml version="1.0" encoding="UTF-8"?>\n<score-partwise version="4.0">\n',
    titleXml(score.head), identificationXml(score, options), PART_LIST, '<part id="P1">\n',
  ]
  score.bars.forEach((bar, index) => {
    const context = contexts[index]!
    const isFirst = index === 0
    const attributes = isFirst ? firstAttributes(context, plan.divisions) : changedAttributes(bar, context)
    const opening = isFirst ? openingXml(score) : ''
    const given = { context, links, plan: plan.bars[index]!, pieces }
    out.push(`<measure ${numbers[index]}>`)
    writeBar(out, bar, given, attributes, opening, index === score.bars.length - 1)
    out.push('</measure>\n')
  })
  out.push('</part>\n</score-partwise>\n')
  return out.join('')
}

/** Pickups and second halves of split bars are not counted (XSD, measure-attributes: implicit); these are named apart, as numbers are unique. */
function measureNumbers(score: Score): string[] {
  let uncounted = 0
  return barPlaces(score).map(({ number, pickup }, index) =>
    (pickup ? `number="${index ? `X${++uncounted}` : number}" implicit="yes"` : `number="${number}"`))
}

const titleXml = (head: Head): string => around('work', head.title && leaf('work-title', head.title))

function identificationXml(score: Score, options: WriteOptions): string {
  const { head } = score
  const supports = (element: string, type: 'yes' | 'no') => empty('supports', { element, type })
  const creator = (type: string, name: string) => name && leaf('creator', name, { type })
  return around('identification', creator('composer', head.composer) + creator('arranger', head.arranger)
    + (head.rights && leaf('rights', head.rights))
    + around('encoding', leaf('software', SOFTWARE) + (options.date ? leaf('encoding-date', options.date) : '')
    + supports('accidental', 'no') + supports('beam', 'yes') + supports('stem', 'yes'))
  + (head.source && leaf('source', head.source))
  + around('miscellaneous', fieldsXml(score))) + '\n'
}

function fieldsXml({ head, bars }: Score): string {
  const [first] = bars
  const unstated = (['meter', 'key'] as const).filter(field => !first?.[field])
  const field = (name: string, value: string) => leaf('miscellaneous-field', value, { name })
  return field(FIELD.instrument, `${head.instrument.scaleLength} ${head.instrument.frets}`)
    + (head.ring === 'let-ring' ? field(FIELD.ring, head.ring) : '')
    + (isPlainSetup(head) ? '' : field(FIELD.strings, stringsText(head.strings)) + field(FIELD.capos, caposText(head.capos)))
    + (unstated.length ? field(FIELD.unstated, unstated.join(' ')) : '')
}

/** General MIDI program 26 is the steel-string guitar, counted from one (GM 1; W3C tutorial on tablature). */
const PART_LIST = '<part-list><score-part id="P1"><part-name>Guitar</part-name>'
  + '<score-instrument id="P1-I1"><instrument-name>Acoustic Guitar (steel)</instrument-name><instrument-sound>pluck.guitar.steel-string</instrument-sound></score-instrument>'
  + '<midi-instrument id="P1-I1"><midi-channel>1</midi-channel><midi-program>26</midi-program></midi-instrument></score-part></part-list>\n'

const keyBody = (key: Key): string => `<fifths>${key.fifths}</fifths><mode>${key.mode}</mode>`

/** The tab staff sounds as it says, so that under a capo its (hidden) key is the sounding one. */
function keyXml(key: Key, head: Head): string {
  const capo = capoOffset(head)
  if (!capo) return `<key>${keyBody(key)}</key>`
  return `<key number="1">${keyBody(key)}</key><key number="2" print-object="no">${keyBody(raisedKey(key, capo))}</key>`
}

const meterXml = (meter: Meter): string => `<time><beats>${meter.beats}</beats><beat-type>${meter.unit}</beat-type></time>`

function changedAttributes(bar: Bar, { head }: Context): string {
  return around('attributes', (bar.key ? keyXml(bar.key, head) : '') + (bar.meter ? meterXml(bar.meter) : ''))
}

function firstAttributes({ head, key, meter }: Context, divisions: number): string {
  const lines = head.strings.length
  return around('attributes', leaf('divisions', divisions) + keyXml(key ?? DEFAULT_KEY, head) + meterXml(meter ?? DEFAULT_METER)
    + '<staves>2</staves><part-symbol>bracket</part-symbol><clef number="1"><sign>G</sign><line>2</line></clef>'
    + `<clef number="2"><sign>TAB</sign><line>${lines - 1}</line></clef>`
    + tabDetails(head) + transposeXml(head, key))
}

function tabDetails(head: Head): string {
  const lines = head.strings.length
  const tunings = Array.from({ length: lines }, (_, index) => tuningXml('staff-tuning', 'line', index + 1, staffTuning(head, lines - index)))
  const capo = capoOffset(head)
  return around('staff-details', '<staff-type>alternate</staff-type>' + leaf('staff-lines', lines) + tunings.join('') + (capo ? leaf('capo', capo) : ''), { number: 2 })
}

function tuningXml(name: string, attribute: string, number: number, { step, alter, octave }: Spelling): string {
  return around(name, leaf('tuning-step', step) + (alter ? leaf('tuning-alter', alter) : '') + leaf('tuning-octave', octave), { [attribute]: number })
}

const letterOf = (key: Key): number => STEPS.findIndex(step => Math.abs(fifthsOf({ step, alter: 0 }) - key.fifths) % 7 === 0)

/** The tab staff is at sounding pitch; said outright, since some readers give a transposition to the whole part (Verovio 6). */
const TAB_TRANSPOSE = '<transpose number="2"><diatonic>0</diatonic><chromatic>0</chromatic></transpose>'

/** Written to sounding: the capo up, an octave down. Letters by the names of the two keys. */
function transposeXml(head: Head, key: Key): string {
  const capo = capoOffset(head)
  const diatonic = (letterOf(raisedKey(key, capo)) - letterOf(key) + 7) % 7
  return `${TAB_TRANSPOSE}<transpose number="1"><diatonic>${diatonic}</diatonic><chromatic>${capo % 12}</chromatic><octave-change>${Math.floor(capo / 12) - 1}</octave-change></transpose>`
}

function openingXml(score: Score): string {
  return scordaturaXml(score.head) + wordsXml(scoreStatement(score)) + (score.head.ring === 'let-ring' ? wordsXml(`${RING_WORDS['let-ring']} throughout`) : '')
}

/** Strings that differ from standard, as the sign for them prints. */
function scordaturaXml(head: Head): string {
  if (!changedStrings(head).length) return ''
  const accords = head.strings.flatMap((open, index) => {
    const pitch = parsePitch(open.pitch)
    const isChanged = open.pitch !== STANDARD_TUNING[index]?.pitch
    return pitch && isChanged ? [tuningXml('accord', 'string', index + 1, pitch)] : []
  })
  return `<direction placement="above"><direction-type><scordatura>${accords.reverse().join('')}</scordatura></direction-type><staff>1</staff></direction>`
}
