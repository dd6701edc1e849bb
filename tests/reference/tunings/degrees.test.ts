import { Chord, ChordType, ScaleType } from 'tonal'
import { describe, expect, it } from 'vitest'
import { STEEL_STRING_GUITAR } from '../../../shared/score/create'
import { boardOf } from '../../../shared/tunings/board'
import { nameChord } from '../../../shared/tunings/chords'
import { openDegrees, placesOf, scaleDegrees } from '../../../shared/tunings/scale'

/** Half steps of a written interval, from the theory books: perfect or major as in the major scale, and altered from there. */
const MAJOR = [0, 2, 4, 5, 7, 9, 11]
function halfSteps(interval: string): number {
  const [, number, quality] = /^(\d+)([PMmdA]+)$/.exec(interval)!
  const step = Number(number) - 1
  const perfect = [0, 3, 4].includes(step % 7)
  const sign = { P: 0, M: 0, m: -1, d: perfect ? -1 : -2, A: 1 }[quality![0]!]!
  return MAJOR[step % 7]! + 12 * Math.floor(step / 7) + sign
}
const LETTERS = ['C', 'D', 'E', 'F', 'G', 'A', 'B']
const chromaOf = (name: string) => (MAJOR[LETTERS.indexOf(name[0]!)]! + [...name.slice(1)].reduce((sum, sign) => sum + (sign === '♯' ? 1 : -1), 0) + 24) % 12

const tunings = ['E2 A2 D3 G3 B3 E4', 'C2 G2 D3 G3 C4 D4', 'D2 G2 D3 F#3 B3 D4', 'G4 C4 E4 A4']
const boards = tunings.map(text => boardOf({ strings: text.split(' ').reverse().map(pitch => ({ pitch })), capos: [{ fret: 2 }], instrument: STEEL_STRING_GUITAR }))
const TONICS = ['C', 'D', 'E', 'F', 'G', 'A', 'B', 'F#', 'Bb', 'Eb', 'Ab', 'Db']

describe('all scales of tonal on the neck', () => {
  it('are there', () => expect(ScaleType.all().length).toBeGreaterThan(90))

  it.each(ScaleType.all().map(each => [each.name, each.intervals] as const))('%s: each place is a degree and no place is missed', (name, intervals) => {
    for (const tonic of TONICS) {
      const degrees = scaleDegrees(tonic, name)!
      const root = chromaOf(tonic.replaceAll('#', '♯').replaceAll('b', '♭'))
      const wanted = intervals.map(interval => (root + halfSteps(interval)) % 12)
      // Letters: the interval's number counted from the tonic's letter.
      degrees.forEach((degree, index) => {
        expect(degree.name[0]).toBe(LETTERS[(LETTERS.indexOf(tonic[0]!) + Number.parseInt(intervals[index]!) - 1) % 7])
        expect(chromaOf(degree.name)).toBe(wanted[index])
        expect(Number.parseInt(degree.label.replace(/[♭♯]/g, ''))).toBe(Number.parseInt(intervals[index]!))
      })
      for (const board of boards.slice(0, tonic === 'C' ? 4 : 1)) {
        const heard = board.opens.flatMap((open, string) => Array.from({ length: 19 }, (_, fret) => ({ string: string + 1, fret, chroma: (open + fret) % 12 })))
          .filter(each => wanted.includes(each.chroma)).map(each => `${each.string}/${each.fret} ${wanted.indexOf(each.chroma)}`)
        const places = placesOf(board, degrees)
        if (places.map(each => `${each.string}/${each.fret} ${each.degree}`).join() !== heard.join()) expect(places).toEqual(heard)
      }
    }
  })

  it('and on the open strings', () => {
    const board = boards[1]!
    expect(openDegrees({ ...board, opens: board.opens.map(open => open - 2) }, scaleDegrees('G', 'major')!).map(each => each?.label)).toEqual(['5', '4', '1', '5', '1', '4'])
  })

  it('and none for what is no scale', () => expect(scaleDegrees('H', 'major') ?? scaleDegrees('C', 'no such scale')).toBeNull())
})

describe('all chords of tonal', () => {
  it.each(ChordType.all().map(each => [each.aliases[0]!, each.intervals] as const))('C%s: its tones, the root lowest, are named so among the names given', (alias, intervals) => {
    const steps = intervals.map(halfSteps)
    expect(Chord.getChord(alias, 'C').intervals.map(halfSteps)).toEqual(steps)
    for (const root of [36, 43, 51]) {
      const name = nameChord(steps.map(step => root + step), { fifths: 0, mode: 'major' })!
      const same = [name, ...name.others].some(each => each.root === root % 12 && (each.kind === alias || sameSet(each.kind, steps)))
      // What tonal calls "7no5" is a seventh chord to us, since players leave the fifth out freely.
      expect(same || name.kind === alias.replace('no5', '')).toBe(true)
    }
  })
})

/** Kinds written differently that have the same tones. */
const sameSet = (kind: string, steps: readonly number[]): boolean =>
  [...new Set(ChordType.get(kind).intervals.map(each => halfSteps(each) % 12))].sort().join() === [...new Set(steps.map(each => each % 12))].sort().join()
