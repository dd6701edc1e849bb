import { toNumber } from '../../score/fraction'
import { plainLength } from '../../score/time'
import type { Context } from '../../score/context'
import type { Bar, Tempo, Voice, VoiceName } from '../../score/types'
import type { BeamValue } from './beams'
import type { Links } from './links'
import type { BarPlan, VoicePlan } from './plan'
import { FEATURE, RING_WORDS, TAB_VOICE_OFFSET, TYPE_NAMES, VOICE_NUMBERS } from './terms'
import { createPieces, writeEvent, type EventFrame, type NoteContext, type Pieces, type Staff } from './writeNote'
import { empty, leaf } from './xml'

export interface BarContext {
  readonly context: Context
  readonly links: Links
  readonly plan: BarPlan
  readonly pieces: Record<Staff, Pieces>
}

export const createBarPieces = (): Record<Staff, Pieces> => ({ 1: createPieces(), 2: createPieces() })

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

function writeVoice(out: string[], { name, voice, durations, beams }: VoicePlan, staff: Staff, bar: BarContext): void {
  const { context, links, pieces } = bar
  const note: NoteContext = {
    head: context.head, key: context.key, links, staff, stem: stemOf(name, staff), pieces: pieces[staff],
    voiceNumber: VOICE_NUMBERS[name] + (staff === 2 ? TAB_VOICE_OFFSET : 0),
  }
  voice.events.forEach((event, index) => {
    const frame = frameOf(voice, index, durations[index] ?? 0, staff === 1 ? beams.get(index) : undefined)
    writeEvent(out, event, voice, frame, note)
  })
}

/** One staff's voices, each from the bar's start; the last is followed by what fills the bar. */
function writeStaff(out: string[], staff: Staff, given: BarContext): void {
  const { voices, played } = given.plan
  if (!voices.length) {
    const voice = VOICE_NUMBERS.upper + (staff === 2 ? TAB_VOICE_OFFSET : 0)
    out.push(`<note><rest measure="yes"/><duration>${played}</duration><voice>${voice}</voice><staff>${staff}</staff></note>`)
  }
  voices.forEach((voice, index) => {
    writeVoice(out, voice, staff, given)
    if (index < voices.length - 1) out.push(backup(voice.total))
    else if (voice.total < played) out.push(`<forward><duration>${played - voice.total}</duration></forward>`)
  })
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

/** The bar's own length where a reader can't tell it from what stands in the bar, and its ring rule. */
function featuresXml(bar: Bar, { isLengthReadable }: BarPlan): string {
  const length = bar.length ? `${bar.length.n}/${bar.length.d}` : 'meter'
  const features = (isLengthReadable ? '' : leaf('feature', length, { type: FEATURE.length }))
    + (bar.ring ? leaf('feature', bar.ring, { type: FEATURE.ring }) : '')
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

/** Adds what stands between the opening and the closing tag of a measure to `out`.
 * @param opening attributes and directions of the piece's start, for the first bar */
export function writeBar(out: string[], bar: Bar, given: BarContext, attributes: string, opening: string, isLast: boolean): void {
  out.push(bar.repeatStart ? START_REPEAT : '', attributes, featuresXml(bar, given.plan), opening,
    bar.tempo ? tempoXml(bar.tempo) : '', bar.ring ? wordsXml(RING_WORDS[bar.ring]) : '')
  writeStaff(out, 1, given)
  out.push(backup(given.plan.played))
  writeStaff(out, 2, given)
  out.push(closingXml(bar, isLast))
}
