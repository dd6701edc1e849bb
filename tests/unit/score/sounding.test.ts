import { existsSync, readdirSync, readFileSync } from 'node:fs'
import { parseXml, XmlElement } from '@rgrove/parse-xml'
import fc from 'fast-check'
import { Note as Tonal } from 'tonal'
import { describe, expect, it } from 'vitest'
import { midiOf, parsePitch, pitchText, type Step } from '../../../shared/score/pitch'
import { capoFret, capoOffset, fretFromNut, isFretOnNeck, openMidi, PARTIAL_AT_FRET, soundingLabel, soundingMidi, staffMidi, staffSpelling } from '../../../shared/score/sounding'
import type { Head } from '../../../shared/score/types'
import { TEST_HEAD } from '../../support/score'

const tuned = (low: string, more: Partial<Head> = {}): Head => ({ ...TEST_HEAD, strings: low.split(' ').toReversed().map(pitch => ({ pitch })), ...more })

/** Tunings and their changes from standard in half steps, string 6 to 1: MEI Guidelines data.COURSETUNING (drop D, open G, open A);
 * S. Baughman, "Orkney Tuning"; whitetreeaz.com, tunings (double drop D, open E). */
const CHANGES: readonly [string, string, readonly number[]][] = [
  ['drop D', 'D2 A2 D3 G3 B3 E4', [-2, 0, 0, 0, 0, 0]],
  ['double drop D', 'D2 A2 D3 G3 B3 D4', [-2, 0, 0, 0, 0, -2]],
  ['open G', 'D2 G2 D3 G3 B3 D4', [-2, -2, 0, 0, 0, -2]],
  ['open A', 'E2 A2 E3 A3 C#4 E4', [0, 0, 2, 2, 2, 0]],
  ['open E', 'E2 B2 E3 G#3 B3 E4', [0, 2, 2, 1, 0, 0]],
  ['Orkney', 'C2 G2 D3 G3 C4 D4', [-4, -2, 0, 0, 1, -2]],
]

describe('law 1: sounding pitch = open string + capo that covers it + fret', () => {
  it.each(CHANGES)('%s lies as far from standard as its sources say', (_, pitches, changes) => {
    const standard = tuned('E2 A2 D3 G3 B3 E4')
    const head = tuned(pitches)
    expect([6, 5, 4, 3, 2, 1].map(string => openMidi(head, string) - openMidi(standard, string))).toEqual(changes)
  })

  it('holds for every string, capo and fret', () => {
    fc.assert(fc.property(fc.constantFrom(...CHANGES), fc.integer({ min: 1, max: 6 }), fc.nat(12), fc.nat(7), (row, string, fret, capo) => {
      const head = tuned(row[1], capo ? { capos: [{ fret: capo }] } : {})
      const open = Tonal.midi(row[1].split(' ')[6 - string]!)!
      expect(soundingMidi(head, { string, fret })).toBe(open + capo + fret)
      expect(fretFromNut(head, { string, fret })).toBe(capo + fret)
      // Staff pitch is written as if there were no full capo.
      expect(staffMidi(head, { string, fret })).toBe(open + fret)
    }))
  })

  it('lets a full and a partial capo be on together; the higher one stops a string', () => {
    const head = tuned('D2 G2 D3 G3 B3 D4', { capos: [{ fret: 2 }, { fret: 4, strings: [3, 4, 5] }] })
    expect([1, 2, 3, 4, 5, 6].map(string => capoFret(head, string))).toEqual([2, 2, 4, 4, 4, 2])
    expect(soundingLabel(head, { string: 4, fret: 0 }, 0)).toBe('F♯3')
    expect(capoOffset(head)).toBe(2)
    // The partial capo is heard on the staff, the full one is not.
    expect(staffMidi(head, { string: 4, fret: 0 })).toBe(50 + 2)
    expect(isFretOnNeck(head, 4, 16)).toBe(true)
    expect(isFretOnNeck(head, 4, 17)).toBe(false)
    expect(isFretOnNeck(head, 4, -1)).toBe(false)
  })

  it('starts a banjo’s short fifth string at the fifth fret, sounding as named (G4; from memory)', () => {
    const banjo: Head = { ...TEST_HEAD, strings: [{ pitch: 'D4' }, { pitch: 'B3' }, { pitch: 'G3' }, { pitch: 'D3' }, { pitch: 'G4', from: 5 }] }
    expect(soundingMidi(banjo, { string: 5, fret: 0 })).toBe(Tonal.midi('G4'))
    expect(soundingMidi(banjo, { string: 5, fret: 2 })).toBe(Tonal.midi('A4'))
    expect(soundingMidi({ ...banjo, capos: [{ fret: 2 }] }, { string: 5, fret: 0 })).toBe(Tonal.midi('G4'))
    expect(soundingMidi({ ...banjo, capos: [{ fret: 7 }] }, { string: 5, fret: 0 })).toBe(Tonal.midi('A4'))
    expect(() => openMidi(banjo, 6)).toThrow(RangeError)
  })

  it('has the harmonics of an ideal string at the places where its modes have nodes: fret 12·log₂(p/(p−k)) (Mersenne)', () => {
    for (const [fret, partial] of Object.entries(PARTIAL_AT_FRET)) {
      const nodes = Array.from({ length: partial - 1 }, (_, k) => 12 * Math.log2(partial / (partial - 1 - k)))
      expect(Math.min(...nodes.map(node => Math.abs(node - Number(fret)))), `fret ${fret}`).toBeLessThan(0.17)
    }
    const head = tuned('D2 G2 D3 G3 B3 D4', { capos: [{ fret: 2 }] })
    expect(soundingMidi(head, { string: 6, fret: 12, harmonic: { partial: 2 } })).toBe(38 + 2 + 12)
    expect(soundingMidi(head, { string: 6, fret: 7, harmonic: { partial: 3 } })).toBeCloseTo(40 + 19.02, 2)
    expect(soundingMidi(head, { string: 6, fret: 5, harmonic: { partial: 4 } })).toBe(40 + 24)
  })

  it('respells a note only into the pitch it sounds', () => {
    const head = tuned('E2 A2 D3 G3 B3 E4')
    const spelled = (step: Step, alter: number, fret: number) => pitchText(staffSpelling(head, { string: 3, fret, spelling: { step, alter } }, 0))
    expect(spelled('A', -1, 1)).toBe('Ab3')
    expect(spelled('G', 1, 1)).toBe('G#3')
    expect(spelled('B', 1, 5)).toBe('B#3')
    expect(spelled('C', -1, 4)).toBe('Cb4')
    expect(spelled('A', 0, 1)).toBe('G#3')
  })
})

/** Notes with string, fret and pitch in the W3C's own MusicXML 4.0 example files (w3.org/2021/06/musicxml40), and a file with a capo. */
const EXAMPLES = '../shared/standards/musicxml-4.0/examples'
const exampleFiles = (): string[] => ['whole', 'fragments'].flatMap(folder =>
  readdirSync(`${EXAMPLES}/${folder}`).filter(name => name.endsWith('.xml')).map(name => `${EXAMPLES}/${folder}/${name}`))

const children = (element: XmlElement): XmlElement[] => element.children.filter(child => child instanceof XmlElement)
function* all(element: XmlElement, name: string): Generator<XmlElement> {
  for (const child of children(element)) {
    if (child.name === name) yield child
    yield* all(child, name)
  }
}
const textOf = (element: XmlElement, name: string): string | undefined => all(element, name).next().value?.text.trim()

function notesOf(path: string) {
  const root = parseXml(readFileSync(path, 'utf8')).root!
  const notes = root.name === 'note' ? [root] : [...all(root, 'note')]
  return notes.flatMap((note) => {
    const [string, fret, step] = ['string', 'fret', 'step'].map(name => textOf(note, name))
    if (!string || !fret || !step) return []
    const pitch = { step: step as Step, alter: Number(textOf(note, 'alter') ?? 0), octave: Number(textOf(note, 'octave')) }
    return [{ string: Number(string), fret: Number(fret), midi: midiOf(pitch) }]
  })
}

describe.runIf(existsSync('../shared/standards'))('law 1 in published files', () => {
  it('gives the W3C’s example notes their pitches', () => {
    const notes = exampleFiles().filter(path => readFileSync(path, 'utf8').includes('<fret>')).flatMap(notesOf)
    expect(notes).toHaveLength(13)
    const standard = tuned('E2 A2 D3 G3 B3 E4')
    for (const { midi, ...note } of notes) expect(soundingMidi(standard, note), JSON.stringify(note)).toBe(midi)
  })

  it('gives a tab staff with a capo at the second fret its pitches', () => {
    const path = '../shared/standards/linked-staves-capo2.musicxml'
    const root = parseXml(readFileSync(path, 'utf8')).root!
    const pitches = [...all(root, 'staff-tuning')].map(each => `${textOf(each, 'tuning-step')}${textOf(each, 'tuning-octave')}`)
    expect(pitches.every(pitch => parsePitch(pitch))).toBe(true)
    const head = tuned(pitches.join(' '), { capos: [{ fret: Number(textOf(root, 'capo')) }] })
    const notes = notesOf(path)
    expect(notes).toHaveLength(5)
    for (const { midi, ...note } of notes) expect(soundingMidi(head, note)).toBe(midi)
  })
})
