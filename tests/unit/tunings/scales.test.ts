import { describe, expect, it } from 'vitest'
import { STEEL_STRING_GUITAR } from '../../../shared/score/create'
import { boardOf } from '../../../shared/tunings/board'
import { byPitch, neighbours, spanBetweenPlaces } from '../../../shared/tunings/neighbours'
import { longestRun, runCost } from '../../../shared/tunings/run'
import { placesOf, scaleDegrees, type ScalePlace } from '../../../shared/tunings/scale'

const board = (text: string, capos: { fret: number }[] = []) =>
  boardOf({ strings: text.split(' ').reverse().map(pitch => ({ pitch })), capos, instrument: STEEL_STRING_GUITAR })
const DADGAD = board('D2 A2 D3 G3 A3 D4')
const D = scaleDegrees('D', 'major')!
const places = placesOf(DADGAD, D, 12)
const at = (text: string): ScalePlace => places.find(each => `${each.string}/${each.fret}` === text)!
const line = (text: string) => text.split(' ').map(at)

describe('neighbours in D A D G A D', () => {
  const all = neighbours(DADGAD, places)
  const pairs = all.map(({ low, high }) => `${low.string}/${low.fret} ${high.string}/${high.fret}`)

  // Common practice: the fourth and fifth of the D scale lie on neighbouring open strings.
  it('has the fourth and fifth on open strings 3 and 2', () => {
    const step = all.find(each => each.open === 2)!
    expect([step.low.label, step.low.string, step.high.label, step.high.string]).toEqual(['4', 3, '5', 2])
    expect(all.filter(each => each.open === 2)).toHaveLength(1)
  })

  it('are one scale step apart, on two strings, within reach', () => {
    for (const { low, high, span } of all) {
      expect(low.string).not.toBe(high.string)
      expect((low.degree + 1) % 7).toBe(high.degree)
      expect(high.midi - low.midi).toBeLessThanOrEqual(2)
      expect(span).toBeLessThanOrEqual(115)
    }
    expect(new Set(pairs).size).toBe(pairs.length)
  })

  it('and runs take no gap between strings far apart for a step', () => {
    // A0 and C♯1 reach C♯2 at fret 12 at most; the next string begins at A4.
    const apart = board('A0 C#1 A4 E5')
    const scale = placesOf(apart, scaleDegrees('A', 'major')!, 12)
    expect(neighbours(apart, scale).filter(({ low, high }) => high.midi - low.midi > 2)).toEqual([])
    const run = longestRun(apart, scale).up.map(({ place }) => place.midi)
    expect(run.slice(1).every((midi, index) => midi - run[index]! <= 2)).toBe(true)
  })

  it('leave out what no hand reaches', () => {
    // F♯ on string 6 at 4 and G on string 4 at 5 lie together; F♯ on string 3 at 11 and G on string 4 at 5 do not.
    expect(pairs).toContain('5/4 4/0')
    expect(neighbours(DADGAD, places, 60).length).toBeLessThan(all.length)
  })
})

describe('runs', () => {
  // T. McManus, "Harp-like Scales in DADGAD": D4 C♯4 B3 A3 G3 as 1/0 2/4 3/4 2/0 3/0.
  it('lay D C♯ B A G as published, up a string to go down a note', () => {
    const down = longestRun(DADGAD, places).down.map(({ place }) => `${place.string}/${place.fret}`).join(' ')
    expect(down).toContain('1/0 2/4 3/4 2/0 3/0')
  })

  // Common practice: from open string 4 the third, fourth and fifth each have a string of their own.
  it('has a string each for third, fourth and fifth', () => {
    const run = longestRun(DADGAD, places).up.map(({ place }) => place)
    const strings = ['3', '4', '5'].map(label => run.find(each => each.label === label && each.midi > 50)!.string)
    expect(new Set(strings).size).toBe(3)
  })

  it.each(['D2 A2 D3 G3 A3 D4', 'C2 G2 D3 G3 C4 D4', 'E2 A2 D3 G3 B3 E4', 'G4 C4 E4 A4', 'D2 A2 D3 D3 A3 D4'])('in %s go step by step, never twice on a string, within reach', (text) => {
    const own = board(text, [{ fret: 2 }])
    const scale = placesOf(own, scaleDegrees('A', 'major')!, 14)
    const { up, down } = longestRun(own, scale)
    const order = byPitch(scale).map(each => each[0]!.midi)
    expect(up.length).toBeGreaterThan(4)
    for (const run of [up, [...down].reverse()]) {
      run.slice(1).forEach(({ place }, index) => {
        const last = run[index]!.place
        expect(place.string).not.toBe(last.string)
        expect(order.indexOf(place.midi)).toBe(order.indexOf(last.midi) + 1)
        expect(spanBetweenPlaces(own, last, place)).toBeLessThanOrEqual(115)
      })
    }
    // Ring: nobody stops a string before its note is said to end, and what ends by string or hand does so there.
    up.forEach(({ place, ringsTo, ends }, index) => {
      const meanwhile = up.slice(index + 1, ringsTo)
      expect(meanwhile.every(next => next.place.string !== place.string && spanBetweenPlaces(own, place, next.place) <= 115)).toBe(true)
      const next = up[ringsTo]?.place
      if (ends === 'end') expect(ringsTo).toBe(up.length)
      else if (ends === 'string') expect(next!.string).toBe(place.string)
      else expect(spanBetweenPlaces(own, place, next!)).toBeGreaterThan(115)
    })
  })

  it('equal a plain search through every way to lay them', () => {
    // Frets 0 to 5 of the four upper strings of an open tuning: few enough to try all.
    const own = board('D3 F#3 A3 D4')
    const steps = byPitch(placesOf(own, D, 5))
    let best: { length: number, cost: number } = { length: 0, cost: 0 }
    const walk = (step: number, path: readonly ScalePlace[]) => {
      const cost = runCost(own, path)
      if (path.length > best.length || (path.length === best.length && cost < best.cost)) best = { length: path.length, cost }
      for (const place of steps[step] ?? []) {
        const last = path.at(-1)
        if (!last || (last.string !== place.string && spanBetweenPlaces(own, last, place) <= 115)) walk(step + 1, [...path, place])
      }
    }
    steps.forEach((_, start) => walk(start, []))
    const found = longestRun(own, steps.flat()).up.map(each => each.place)
    expect(found.length).toBe(best.length)
    expect(runCost(own, found)).toBeCloseTo(best.cost, 9)
  })

  it('are costed alike', () => expect(runCost(DADGAD, line('3/0 2/0 3/4 2/4 1/0'))).toBeLessThan(runCost(DADGAD, line('4/5 3/2 4/9 3/6 2/5'))))
})
