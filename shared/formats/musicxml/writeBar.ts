import { ZERO, compare, equals, subtract, toNumber, type Fraction } from '../../score/fraction'
import { barLength, lengthOf, meterLength, playedLength, plainLength, voiceTotal } from '../../score/time'
import type { Context } from '../../score/context'
import { VOICE_NAMES, type Bar, type Tempo, type Voice, type VoiceName } from '../../score/types'
import { beamsOf, type BeamValue } from './beams'
import type { Links } from './links'
import { FEATURE, RING_WORDS, TAB_VOICE_OFFSET, TYPE_NAMES, VOICE_NUMBERS } from './terms'
import { eventXml, type EventFrame, type NoteContext, type Staff } from './writeNote'
import { empty, leaf } from './xml'

export interface BarContext {
  readonly context: Context
  readonly links: Links
  /** Divisions of a whole note. */
  readonly divisions: number
  /** A pickup starts late in its meter. */
  readonly offset: Fraction
}

const NO_BEAMS: ReadonlyMap<number, readonly BeamValue[]> = new Map()
const NOTHING: readonly never[] = []

function frameOf(voice: Voice, index: number, duration: number, beams: readonly BeamValue[] | undefined): EventFrame {
  const event = voice.events[index]
  const ids = event?.length.tuplets
  if (!event || !ids || !voice.tuplets) return { duration, beams: beams ?? NOTHING, tupletStarts: NOTHING, tupletStops: NOTHING }
  const isIn = (position: number, id: string) => voice.events[position]?.length.tuplets?.includes(id) ?? false
  const levels = ids.flatMap((id, level) => {
    const tuplet = voice.tuplets?.find(each => each.id === id)
    return tuplet ? [{ level: level + 1, tuplet }] : []
  })
  return {
    duration, beams: beams ?? NOTHING,
    tupletStarts: levels.filter(({ tuplet }) => !isIn(index - 1, tuplet.id)),
    tupletStops: levels.filter(({ tuplet }) => !isIn(index + 1, tuplet.id)).map(({ level }) => level).reverse(),
  }
}

function stemOf(name: VoiceName, staff: Staff): NoteContext['stem'] {
  if (staff === 2) return 'none'
  return name === 'middle' ? '' : name === 'upper' ? 'up' : 'down'
}

const ticks = (length: Fraction, divisions: number): number => length.n * (divisions / length.d)

function voiceXml(name: VoiceName, voice: Voice, staff: Staff, bar: BarContext): string {
  const { context, links, divisions, offset } = bar
  const note: NoteContext = {
    head: context.head, key: context.key, links, staff, stem: stemOf(name, staff),
    voiceNumber: VOICE_NUMBERS[name] + (staff === 2 ? TAB_VOICE_OFFSET : 0),
  }
  const beams = staff === 1 ? beamsOf(voice, context.meter, offset) : NO_BEAMS
  let result = ''
  voice.events.forEach((event, index) => {
    const duration = ticks(lengthOf(event.length, voice.tuplets), divisions)
    result += eventXml(event, voice, frameOf(voice, index, duration, beams.get(index)), note)
  })
  return result
}

/** One staff's voices, each from the bar's start; the last is followed by what fills the bar. */
function staffXml(bar: Bar, staff: Staff, played: Fraction, given: BarContext): string {
  const names = VOICE_NAMES.filter(name => bar.voices[name]?.events.length)
  const whole = ticks(played, given.divisions)
  if (!names.length) {
    const voice = VOICE_NUMBERS.upper + (staff === 2 ? TAB_VOICE_OFFSET : 0)
    return `<note><rest measure="yes"/><duration>${whole}</duration><voice>${voice}</voice><staff>${staff}</staff></note>`
  }
  let result = ''
  names.forEach((name, index) => {
    const voice = bar.voices[name]
    if (!voice) return
    result += voiceXml(name, voice, staff, given)
    const total = ticks(voiceTotal(voice), given.divisions)
    const isLast = index === names.length - 1
    if (!isLast) result += backup(total)
    else if (total < whole) result += `<forward><duration>${whole - total}</duration></forward>`
  })
  return result
}

const backup = (duration: number): string => `<backup><duration>${duration}</duration></backup>`

/** A metronome mark, and for players the tempo in quarter notes a minute (XSD, sound/@tempo). */
function tempoXml(tempo: Tempo): string {
  const quarters = tempo.perMinute * toNumber(plainLength(tempo)) * 4
  return '<direction placement="above"><direction-type><metronome>'
    + leaf('beat-unit', TYPE_NAMES[tempo.base]) + '<beat-unit-dot/>'.repeat(tempo.dots) + leaf('per-minute', tempo.perMinute)
    + '</metronome></direction-type><staff>1</staff>' + empty('sound', { tempo: quarters }) + '</direction>'
}

export const wordsXml = (words: string): string =>
  `<direction placement="above"><direction-type>${leaf('words', words)}</direction-type><staff>1</staff></direction>`

/** The bar's own length where a reader can't tell it from what stands in the bar. */
function lengthFeature(bar: Bar, context: Context, played: Fraction): string {
  const meter = meterLength(context.meter)
  const own = barLength(bar, context.meter)
  const isReadable = equals(played, own) && (bar.length === undefined) === equals(own, meter)
  if (isReadable) return ''
  return leaf('feature', bar.length ? `${bar.length.n}/${bar.length.d}` : 'meter', { type: FEATURE.length })
}

function featuresXml(bar: Bar, context: Context, played: Fraction): string {
  const features = lengthFeature(bar, context, played) + (bar.ring ? leaf('feature', bar.ring, { type: FEATURE.ring }) : '')
  return features && `<grouping type="single">${features}</grouping>`
}

const START_REPEAT = '<barline location="left"><bar-style>heavy-light</bar-style><repeat direction="forward"/></barline>'

function closingXml(bar: Bar, isLast: boolean): string {
  if (bar.repeatEnd) {
    const repeat = empty('repeat', { direction: 'backward', times: bar.repeatEnd > 2 ? bar.repeatEnd : undefined })
    return `<barline location="right"><bar-style>light-heavy</bar-style>${repeat}</barline>`
  }
  return isLast ? '<barline location="right"><bar-style>light-heavy</bar-style></barline>' : ''
}

/** What stands between the opening and the closing tag of a measure.
 * @param opening attributes and directions of the piece's start, for the first bar */
export function barXml(bar: Bar, given: BarContext, attributes: string, opening: string, isLast: boolean): string {
  const played = playedLength(bar, given.context.meter)
  return (bar.repeatStart ? START_REPEAT : '') + attributes + featuresXml(bar, given.context, played)
    + opening + (bar.tempo ? tempoXml(bar.tempo) : '') + (bar.ring ? wordsXml(RING_WORDS[bar.ring]) : '')
    + staffXml(bar, 1, played, given) + backup(ticks(played, given.divisions)) + staffXml(bar, 2, played, given) + closingXml(bar, isLast)
}

/** Where a first bar shorter than its meter begins in it. */
export function offsetOf(bar: Bar, context: Context, index: number): Fraction {
  const missing = subtract(meterLength(context.meter), barLength(bar, context.meter))
  return index === 0 && compare(missing, ZERO) > 0 ? missing : ZERO
}
