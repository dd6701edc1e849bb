import { parsePitch, spell, type Spelling } from '../../score/pitch'
import { capoOffset, openMidi } from '../../score/sounding'
import { midiOf } from '../../score/pitch'
import type { Base, Capo, Head, OpenString, VoiceName } from '../../score/types'

/** What writer and reader must agree on. Names and values: W3C MusicXML 4.0 XSD. */

export const SOFTWARE = 'Copperwound'

/** note-type-value of the XSD. */
export const TYPE_NAMES: Readonly<Record<Base, string>> = { 1: 'whole', 2: 'half', 4: 'quarter', 8: 'eighth', 16: '16th', 32: '32nd', 64: '64th' }
export const BASE_OF_TYPE: Readonly<Record<string, Base>> = {
  'whole': 1, 'half': 2, 'quarter': 4, 'eighth': 8, '16th': 16, '32nd': 32, '64th': 64,
}

/** Voices of the notation staff; the tab staff counts on from 5, four to a staff being common practice. */
export const VOICE_NUMBERS: Readonly<Record<VoiceName, number>> = { upper: 1, lower: 2, middle: 3 }
export const TAB_VOICE_OFFSET = 4

/**
 * Where the format has no place of its own, the exact value stands in elements that the XSD leaves to programs:
 * miscellaneous-field for the piece, grouping/feature for a bar, play/other-play for a note. Written only where the
 * common elements alone would be read back differently.
 */
export const FIELD = {
  ring: 'copperwound-ring', instrument: 'copperwound-instrument', strings: 'copperwound-strings',
  capos: 'copperwound-capos', unstated: 'copperwound-unstated',
} as const
export const FEATURE = { length: 'copperwound-length', ring: 'copperwound-ring' } as const
export const PLAY = { ring: 'copperwound-ring', link: 'copperwound-link', touched: 'copperwound-touched', spelling: 'copperwound-spelling' } as const

/** Words that stand in the staff for a ring rule, which MusicXML can't say of a bar or a piece. */
export const RING_WORDS = { 'let-ring': 'let ring', 'written': 'ring as written' } as const

/**
 * The tuning of a string as `staff-tuning` states it, so that tuning + capo + fret is the sounding pitch on every string:
 * what a partial capo or the start of a short string adds beyond the full capo is in the tuning. The true strings and capos
 * are then in miscellaneous fields.
 */
export function staffTuning(head: Head, string: number): Spelling {
  const midi = openMidi(head, string) - capoOffset(head)
  const own = parsePitch(head.strings[string - 1]?.pitch ?? '')
  return own && midiOf(own) === midi ? own : spell(midi, 0)
}

/** True where staff-tuning and one capo say all there is. */
export const isPlainSetup = (head: Head): boolean =>
  head.strings.every(open => open.from === undefined) && (head.capos.length === 0 || (head.capos.length === 1 && head.capos[0]?.strings === undefined))

/** "D4 B3 G3 D3 G4@5": string 1 first, @ the fret where a short string starts. */
export const stringsText = (strings: readonly OpenString[]): string =>
  strings.map(open => open.pitch + (open.from === undefined ? '' : `@${open.from}`)).join(' ')

export const stringsFromText = (text: string): OpenString[] => text.split(' ').map((part) => {
  const [pitch = '', from] = part.split('@')
  return from === undefined ? { pitch } : { pitch, from: Number(from) }
})

/** "2 4/1,2,3": a full capo at fret 2, and one at fret 4 on strings 1 to 3. */
export const caposText = (capos: readonly Capo[]): string =>
  capos.map(capo => capo.fret + (capo.strings ? `/${capo.strings.join(',')}` : '')).join(' ')

export const caposFromText = (text: string): Capo[] => text.split(' ').filter(Boolean).map((part) => {
  const [fret, strings] = part.split('/')
  return strings === undefined ? { fret: Number(fret) } : { fret: Number(fret), strings: strings.split(',').map(Number) }
})
