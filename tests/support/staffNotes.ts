import { XmlElement, parseXml } from '@rgrove/parse-xml'
import { add, fraction, type Fraction } from '../../shared/score/fraction'

/** A note as MusicXML states it: pitch as a MIDI number, length in whole notes; tied notes are one. */
export interface StaffNote { readonly midi: number, readonly length: Fraction }

const SEMITONES: Record<string, number> = { C: 0, D: 2, E: 4, F: 5, G: 7, A: 9, B: 11 }

const elements = (parent: XmlElement, name: string): XmlElement[] =>
  parent.children.filter((child): child is XmlElement => child instanceof XmlElement && child.name === name)
const value = (parent: XmlElement, name: string): string | undefined => elements(parent, name)[0]?.text

/** The pitched notes of one staff and voice, in order, read by nothing but the element names of the MusicXML 4.0 schema. */
export function staffNotes(text: string, wanted: { staff: number, voice: number }): StaffNote[] {
  const root = parseXml(text).root!
  const notes: StaffNote[] = []
  let divisions = 1
  for (const measure of elements(elements(root, 'part')[0]!, 'measure')) {
    for (const child of measure.children) {
      if (!(child instanceof XmlElement)) continue
      if (child.name === 'attributes') divisions = Number(value(child, 'divisions') ?? divisions)
      if (child.name !== 'note' || Number(value(child, 'staff') ?? 1) !== wanted.staff || Number(value(child, 'voice') ?? 1) !== wanted.voice) continue
      const pitch = elements(child, 'pitch')[0]
      if (!pitch) continue
      const midi = 12 * (Number(value(pitch, 'octave')) + 1) + SEMITONES[value(pitch, 'step')!]! + Number(value(pitch, 'alter') ?? 0)
      const length = fraction(Number(value(child, 'duration')), 4 * divisions)
      const before = notes.at(-1)
      if (before && elements(child, 'tie').some(tie => tie.attributes.type === 'stop')) notes[notes.length - 1] = { midi, length: add(before.length, length) }
      else notes.push({ midi, length })
    }
  }
  return notes
}
