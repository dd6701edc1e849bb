import { Note } from 'tonal'
import { describe, expect, it } from 'vitest'
import { render, scheduleOf } from '../../../shared/sound'
import type { Capo, OpenString } from '../../../shared/score/types'
import { parseScore } from '../../support/score'
import { byAutocorrelation, byPitchy, centsBetween, SAMPLE_RATE } from './measure'

/** Cents of 440 Hz for A4 (ISO 16:1975), equal temperament; `tonal` names the frequencies. */
const WANTED_CENTS = 1
const TUNINGS = { 'standard': 'E2 A2 D3 G3 B3 E4', 'C G D G C D': 'C2 G2 D3 G3 C4 D4', 'B F♯ B E B D♯': 'B1 F#2 B2 E3 B3 D#4' }

const stringsOf = (lowToHigh: string): readonly OpenString[] => lowToHigh.split(' ').reverse().map(pitch => ({ pitch }))

interface Sounded { readonly string: number, readonly fret: number, readonly marks?: string }

const play = ({ string, fret, marks = '' }: Sounded, strings: readonly OpenString[], capos: readonly Capo[] = []): Float32Array =>
  render(scheduleOf(parseScore(`{q=60} ${string}/${fret}${marks}h zh`, { strings, capos, ring: 'let-ring' })), SAMPLE_RATE, { tail: 0 })

/** The greater error of two ways of measuring, in cents. */
function error(sounded: Sounded, wanted: number, strings: readonly OpenString[], capos?: readonly Capo[]): number {
  const samples = play(sounded, strings, capos)
  return Math.max(...[byPitchy(samples), byAutocorrelation(samples, wanted)].map(hertz => Math.abs(centsBetween(hertz, wanted))))
}

const hertz = (pitch: string, halfSteps = 0): number => Note.freq(Note.fromMidi(Note.midi(pitch)! + halfSteps))!

describe('pitch', () => {
  for (const [name, pitches] of Object.entries(TUNINGS)) {
    it(`is right on each open string and at fret 12 in ${name}`, () => {
      const strings = stringsOf(pitches)
      for (const [index, { pitch }] of strings.entries()) {
        for (const fret of [0, 12]) expect(error({ string: index + 1, fret }, hertz(pitch, fret), strings), `${pitch} fret ${fret}`).toBeLessThan(WANTED_CENTS)
      }
    })
  }

  it('is right at every fret from 0 to 20 of every string in standard tuning', () => {
    const strings = stringsOf(TUNINGS.standard)
    const errors = strings.flatMap(({ pitch }, index) =>
      Array.from({ length: 21 }, (_, fret) => error({ string: index + 1, fret }, hertz(pitch, fret), strings)))
    console.info(`pitch: worst of ${errors.length} notes ${Math.max(...errors).toFixed(3)} cents, mean ${(errors.reduce((a, b) => a + b) / errors.length).toFixed(3)}`)
    expect(errors).toHaveLength(126)
    expect(Math.max(...errors)).toBeLessThan(WANTED_CENTS)
  })

  it('counts the capo in, a partial one on its strings only', () => {
    const strings = stringsOf(TUNINGS['C G D G C D'])
    const capos = [{ fret: 2, strings: [1, 2, 3, 4, 5] }]
    expect(error({ string: 5, fret: 3 }, hertz('C3'), strings, capos)).toBeLessThan(WANTED_CENTS)
    expect(error({ string: 6, fret: 3 }, hertz('D#2'), strings, capos)).toBeLessThan(WANTED_CENTS)
  })

  // The partials of a string are whole multiples of its fundamental (Mersenne; Fletcher and Rossing, §2.1).
  it('gives natural harmonics the multiples of the open string', () => {
    const strings = stringsOf(TUNINGS.standard)
    for (const [fret, partial] of [[12, 2], [7, 3], [5, 4], [4, 5]] as const) {
      expect(error({ string: 6, fret, marks: `<${partial}` }, hertz('E2') * partial, strings)).toBeLessThan(WANTED_CENTS)
    }
  })

  it('is the same at every tempo', () => {
    const schedule = scheduleOf(parseScore('{q=60} 3/2w'))
    for (const rate of [0.25, 0.5, 1, 1.5]) {
      const samples = render(schedule, SAMPLE_RATE, { rate })
      expect(Math.abs(centsBetween(byPitchy(samples), hertz('A3')))).toBeLessThan(WANTED_CENTS)
    }
  })

  it('is right after hammering on and pulling off', () => {
    const samples = render(scheduleOf(parseScore('{q=60} 3/0hq 3/2pq 3/0h')), SAMPLE_RATE)
    const [hammered, pulled] = [samples.subarray(SAMPLE_RATE), samples.subarray(2 * SAMPLE_RATE)]
    expect(Math.abs(centsBetween(byPitchy(hammered), hertz('A3')))).toBeLessThan(WANTED_CENTS)
    expect(Math.abs(centsBetween(byPitchy(pulled), hertz('G3')))).toBeLessThan(WANTED_CENTS)
  })
})
