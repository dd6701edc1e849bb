import { describe, expect, it } from 'vitest'
import { STEEL_STRING_GUITAR } from '../../../shared/score/create'
import type { Capo, Key } from '../../../shared/score/types'
import { boardOf, chromaOf } from '../../../shared/tunings/board'
import { chordsOfKey } from '../../../shared/tunings/keyChords'
import { judge, shapeSentence, type Shape } from '../../../shared/tunings/shape'
import { findShapes } from '../../../shared/tunings/shapes'

const board = (text: string, capos: Capo[] = []) =>
  boardOf({ strings: text.split(' ').reverse().map(pitch => ({ pitch })), capos, instrument: STEEL_STRING_GUITAR })
const STANDARD = board('E2 A2 D3 G3 B3 E4')
const C: Key = { fifths: 0, mode: 'major' }
const chord = (symbol: string, key: Key = C) => chordsOfKey(key).find(each => each.symbol === symbol)!
const text = (shape: Shape) => [...shape.frets].reverse().map(fret => fret ?? 'x').join('')
const texts = (shapes: readonly Shape[]) => shapes.map(text)

describe('the shapes of first-position chords in standard tuning', () => {
  // The shapes that every method for beginners shows (common practice).
  it.each([['C', 'x32010'], ['Em', '022000'], ['Am', 'x02210'], ['F', '133211'], ['G7', '320001'], ['G', '320003'], ['Dm', 'xx0231']])('%s is found as %s', (symbol, shape) =>
    expect(texts(findShapes(STANDARD, chord(symbol)))).toContain(shape))
  it.each([['D', 'xx0232'], ['A', 'x02220'], ['E', '022100'], ['Bm', 'x20432']])('%s is found as %s', (symbol, shape) =>
    expect(texts(findShapes(STANDARD, chord(symbol, { fifths: symbol === 'Bm' ? 2 : 3, mode: 'major' })))).toContain(shape))

  it('fingers them as the methods do', () => {
    const fingers = (symbol: string, shape: string) => [...findShapes(STANDARD, chord(symbol)).find(each => text(each) === shape)!.fingers].reverse().join('')
    expect(fingers('C', 'x32010')).toBe('032010')
    // Two strings at one fret are two fingers, not a barre.
    expect(fingers('Em', '022000')).toBe('012000')
    expect(fingers('Dm', 'xx0231')).toBe('000231')
    expect(fingers('F', '133211')).toBe('134211')
    expect(findShapes(STANDARD, chord('F')).find(each => text(each) === '133211')!.barre).toEqual({ fret: 1, fromString: 6, toString: 1 })
  })
})

describe('every shape that is found', () => {
  const boards = [STANDARD, board('C2 G2 D3 G3 C4 D4'), board('D2 A2 D3 G3 A3 D4', [{ fret: 2 }]), board('E2 A2 D3 G3 B3 E4', [{ fret: 2, strings: [3, 4, 5] }]), board('G4 C4 E4 A4'), board('B1 E2 A2 D3 G3 B3 E4')]
  const found = boards.flatMap(own => chordsOfKey({ fifths: 1, mode: 'major' }).flatMap(wish => findShapes(own, wish).map(shape => ({ own, wish, shape }))))

  it('exists for nearly every chord', () => expect(found.length).toBeGreaterThan(boards.length * 7))

  it('sounds the chord and nothing else, with what is doubled, missing and lowest rightly told', () => {
    for (const { own, wish, shape } of found) {
      const midis = shape.frets.flatMap((fret, index) => (fret === null ? [] : [own.opens[index]! + fret]))
      const chromas = midis.map(chromaOf)
      expect(chromas.filter(each => !wish.tones.includes(each))).toEqual([])
      wish.tones.forEach((tone, index) => {
        const times = chromas.filter(each => each === tone).length
        expect(shape.missing.includes(wish.names[index]!)).toBe(times === 0)
        expect(shape.doubled.find(each => each.name === wish.names[index])?.times ?? 1).toBe(Math.max(1, times))
      })
      expect(wish.tones[shape.inversion]).toBe(chromaOf(Math.min(...midis)))
      expect(shape.missing.length).toBeLessThanOrEqual(wish.tones.length > 3 ? 1 : 0)
    }
  })

  it('can be held: four fingers, 115 mm, nothing open beneath a barre', () => {
    for (const { own, shape } of found) {
      const fingers = new Set(shape.fingers.filter(Boolean))
      expect(Math.max(0, ...fingers)).toBe(fingers.size)
      expect(fingers.size).toBeLessThanOrEqual(4)
      expect(shape.span).toBeLessThanOrEqual(115)
      const places = shape.frets.flatMap((fret, index) => (fret ? [own.stops[index]! + fret] : []))
      // 647.7·(2^(−low/12) − 2^(−high/12)), from the rule of the twelfth root.
      if (places.length) expect(shape.span).toBeCloseTo(647.7 * (2 ** (-Math.min(...places) / 12) - 2 ** (-Math.max(...places) / 12)), 6)
      if (shape.barre) {
        const under = shape.frets.slice(shape.barre.toString - 1, shape.barre.fromString)
        expect(under.every((fret, index) => fret === null || own.stops[shape.barre!.toString - 1 + index]! + fret >= shape.barre!.fret)).toBe(true)
      }
    }
  })
})

it('equals a plain search through all placements', () => {
  // Four strings, frets 0 to 5: every placement judged, none pruned.
  const ukulele = { ...board('G4 C4 E4 A4'), scaleLength: 350 }
  const wish = { reach: 115, frets: 5, count: 1 }
  for (const each of chordsOfKey(C)) {
    const frets = [null, 0, 1, 2, 3, 4, 5, 6, 7, 8, 9, 10]
    const all = frets.flatMap(a => frets.flatMap(b => frets.flatMap(c => frets.map(d => judge(ukulele, each, [a, b, c, d])))))
      .filter((shape): shape is Shape => shape !== null && shape.span <= wish.reach && Math.min(...shape.frets.filter((fret): fret is number => Boolean(fret)), 5) <= 5
        && shape.frets.filter(Boolean).every(fret => fret! - Math.min(...shape.frets.filter((low): low is number => Boolean(low))) <= 11))
    expect(findShapes(ukulele, each, wish)[0]!.cost).toBeCloseTo(Math.min(...all.map(shape => shape.cost)), 9)
  }
})

it('says what there is to know of a shape', () => {
  const [shape] = findShapes(STANDARD, chord('Em'))
  expect(shapeSentence(shape!)).toBe('Root in the bass; E three times and B twice; four strings open.')
})
