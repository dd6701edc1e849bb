import { describe, expect, it } from 'vitest'
import { demoPieces } from '../../server/utils/demoPieces'
import { contextOf } from '../../shared/score/context'
import { ZERO, equals } from '../../shared/score/fraction'
import { scoreSchema } from '../../shared/score/schema'
import { soundingMidi } from '../../shared/score/sounding'
import { surplus } from '../../shared/score/time'
import { VOICE_NAMES } from '../../shared/score/types'
import { validateScore } from '../../shared/score/validate'

const pieces = demoPieces()

describe.each(Object.entries(pieces))('%s', (_name, score) => {
  it('is sound in shape and music', () => {
    expect(scoreSchema.parse(score)).toEqual(score)
    expect(validateScore(score)).toBeNull()
  })

  it('fills every bar exactly', () => {
    const misfits = score.bars.flatMap((bar, index) => VOICE_NAMES.filter((name) => {
      const over = bar.voices[name] ? surplus(bar.voices[name], bar, contextOf(score, index).meter) : ZERO
      return !equals(over, ZERO)
    }).map(name => `bar ${index + 1}, ${name}`))
    expect(misfits).toEqual([])
  })

  it('plucks no string twice where a bar begins', () => {
    // Written lengths that overlap on a string are wanted here; one string plucked for both voices at once is not.
    for (const bar of score.bars) {
      for (const event of bar.voices.upper?.events.slice(0, 1) ?? []) {
        const below = bar.voices.lower?.events[0]?.notes.map(note => note.string) ?? []
        for (const note of event.notes) expect(below).not.toContain(note.string)
      }
    }
  })
})

it('The Saltmarsh Road begins as it is written: G A B C D E D over the open G and D strings', () => {
  // Scientific pitch notation, MIDI numbers by C4 = 60: G3 55, A3 57, B3 59, C4 60, D4 62, E4 64; G2 43, D3 50.
  const { head, bars } = pieces.saltmarshRoad
  const sounds = (name: 'upper' | 'lower') => bars[0]!.voices[name]!.events.flatMap(event => event.notes.map(note => soundingMidi(head, note)))
  expect(sounds('upper')).toEqual([55, 57, 59, 60, 62, 64, 62])
  expect(sounds('lower')).toEqual([43, 50])
  // The second partial over fret 12 is the octave of the open string (D4 62, C4 60).
  expect(bars[13]!.voices.upper!.events.map(event => soundingMidi(head, event.notes[0]!))).toEqual([74, 72])
  expect([bars[7]!.repeatEnd, bars[8]!.repeatStart, bars[15]!.repeatEnd]).toEqual([2, true, 2])
})

it('the pieces stand in different tunings', () => {
  const tunings = Object.values(pieces).map(score => score.head.strings.map(open => open.pitch).join(' '))
  expect(new Set(tunings).size).toBe(tunings.length)
})
