import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { STANDARD_TUNING } from '../../../shared/score/create'
import { midiOfText, pitchText } from '../../../shared/score/pitch'
import { catalogue, stringsOf } from '../../../shared/tunings/catalogue'
import { loadOf } from '../../../shared/tunings/load'
import { retuningPlan, type RetuningPlan } from '../../../shared/tunings/retune'
import { LIGHT_SET } from '../../../shared/tunings/sets'
import { spellTogether } from '../../../shared/tunings/spelling'

const list = (text: string) => text.split(' ').reverse().map(pitch => ({ pitch }))
const midis = (strings: readonly { pitch: string }[]) => strings.map(({ pitch }) => midiOfText(pitch))
const STRUNG = { set: LIGHT_SET, scaleLength: 647.7 }
const fromStandard = (text: string) => retuningPlan(STANDARD_TUNING, list(text), STRUNG)
const brief = (plan: RetuningPlan) => plan.steps.map(step => `${step.string} ${step.hear.kind === 'tone' ? `tone ${step.hear.pitch}` : `${step.hear.string}/${step.hear.fret} ${step.hear.octaves}`}`)

/** Plays the plan and checks by arithmetic that each reference sounds what it is said to sound at that moment. */
function follow(from: readonly { pitch: string }[], to: readonly { pitch: string }[], plan: RetuningPlan) {
  const now = midis(from)
  for (const { string, to: pitch, hear, otherwise } of plan.steps) {
    for (const reference of [hear, otherwise]) {
      if (reference?.kind === 'string') {
        expect(reference.string).not.toBe(string)
        expect(now[reference.string - 1]! + reference.fret).toBe(midiOfText(pitch) + reference.ownFret + 12 * reference.octaves)
        expect(reference.fret === 0 || reference.ownFret === 0).toBe(true)
        const isDone = now[reference.string - 1] === midis(to)[reference.string - 1]
        expect(reference.trust === 'waiting').toBe(!isDone)
      }
      else if (reference) expect(midiOfText(reference.pitch)).toBe(midiOfText(pitch))
    }
    now[string - 1] = midiOfText(pitch)
  }
  expect(now).toEqual(midis(to))
}

describe('from standard', () => {
  // Common practice: the D strings are tuned to the open D (string 4), the second to the open A an octave below.
  it('goes to D A D G A D by octaves of open strings', () =>
    expect(brief(fromStandard('D2 A2 D3 G3 A3 D4'))).toEqual(['6 4/0 1', '2 5/0 -1', '1 4/0 -1']))

  // S. Baughman, guitarplayer.com 2007, gives the moves to C G D G C D: 6 down to C, 5 down to G, 1 down to D, 2 up to C.
  it('goes to C G D G C D, loosening first', () => {
    const plan = fromStandard('C2 G2 D3 G3 C4 D4')
    expect(plan.steps.map(step => step.string)).toEqual([6, 5, 1, 2])
    expect(plan.steps.map(step => step.sentence)).toEqual([
      'String 6 down four half steps, E2 to C2: stopped at its fret 2 it sounds an octave below string 4 open. Loosen it past C2, then come up to it.',
      'String 5 down two half steps, A2 to G2: it sounds an octave below string 3 open. Loosen it past G2, then come up to it.',
      'String 1 down two half steps, E4 to D4: it sounds an octave above string 4 open. Loosen it past D4, then come up to it.',
      'String 2 up one half step, B3 to C4: it sounds the same as string 3 at fret 5. Raise it slowly; if it goes past C4, loosen it below and come up again.',
    ])
  })

  it('has nothing to hold on to where all strings go down, so a tone comes first', () => {
    const plan = fromStandard('Eb2 Ab2 Db3 Gb3 Bb3 Eb4')
    expect(plan.steps[0]!.hear).toEqual({ kind: 'tone', pitch: 'Eb2' })
    expect(plan.finalPass[0]!.hear).toEqual({ kind: 'tone', pitch: 'Eb2' })
    expect(plan.steps.slice(1).every(step => step.hear.kind === 'string' && step.hear.trust === 'done')).toBe(true)
  })

  it('takes about a minute for three strings (adhdguitarist.blogspot.com: some 60 s a retuning)', () => {
    expect(fromStandard('D2 A2 D3 G3 A3 D4').seconds).toBe(60)
    expect(fromStandard('D2 A2 D3 G3 A3 D4').summary).toMatch(/^Three strings to retune, about a minute\./)
  })

  it('has nothing to do for standard', () => expect(fromStandard('E2 A2 D3 G3 B3 E4')).toMatchObject({ steps: [], finalPass: [], seconds: 0, summary: 'Nothing to retune.' }))
})

describe('from any tuning to any', () => {
  const sixes = catalogue.filter(each => each.pitches.length === 6).map(stringsOf)

  it('each reference on the ways between the catalogue’s tunings sounds as said, and the load never exceeds start and end', () => {
    // Every tuning as a start and as an end, ten ways from each.
    for (const [index, from] of sixes.entries()) {
      for (const to of sixes.filter((_, other) => (index + other) % 3 === 0)) {
        const plan = retuningPlan(from, to, STRUNG)
        follow(from, to, plan)
        const ends = [from, to].map(strings => loadOf(strings, STRUNG.scaleLength, LIGHT_SET).pounds)
        expect(plan.peakPounds).toBeLessThanOrEqual(Math.max(...ends) + 1e-9)
        const directions = plan.steps.map(step => Math.sign(step.halfSteps))
        expect(directions).toEqual([...directions].sort())
      }
    }
  }, 20_000)

  const tuning = (length: number) => fc.array(fc.integer({ min: 28, max: 76 }), { minLength: length, maxLength: length })
  const pairs = fc.integer({ min: 4, max: 10 }).chain(length => fc.tuple(tuning(length), tuning(length)))
  const named = (all: number[]) => spellTogether(all).map(pitch => ({ pitch: pitchText(pitch) }))

  it('holds for 4 to 10 strings in any order of pitch, and the final pass visits each once, by strings checked before', () => fc.assert(fc.property(pairs, ([a, b]) => {
    const [from, to] = [named(a), named(b)]
    const plan = retuningPlan(from, to)
    follow(from, to, plan)
    if (plan.steps.length === 0) return
    expect(plan.finalPass.map(each => each.string).sort((x, y) => x - y)).toEqual(a.map((_, index) => index + 1))
    plan.finalPass.forEach(({ string, hear }, index) => {
      if (hear?.kind !== 'string') return
      expect(plan.finalPass.slice(0, index).some(each => each.string === hear.string)).toBe(true)
      expect(b[hear.string - 1]! + hear.fret).toBe(b[string - 1]! + hear.ownFret + 12 * hear.octaves)
    })
  }), { numRuns: 60 }))

  it('refuses different numbers of strings', () => expect(() => retuningPlan(STANDARD_TUNING, list('G3 D4 A4 E5'))).toThrow(RangeError))
})
