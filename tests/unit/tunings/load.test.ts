import { describe, expect, it } from 'vitest'
import { STANDARD_TUNING } from '../../../shared/score/create'
import { capoAlternative, cautionsOf, loadSentence } from '../../../shared/tunings/cautions'
import { coreInches, gaugeLabel, gaugesOf, unitWeight } from '../../../shared/tunings/gauges'
import { bandOf, loadOf, type Band } from '../../../shared/tunings/load'
import { LIGHT_SET, MEDIUM_SET, SETS, usualSet } from '../../../shared/tunings/sets'

const SCALE = 647.7
const list = (text: string) => text.split(' ').reverse().map(pitch => ({ pitch }))
const load = (text: string, set = LIGHT_SET, scale = SCALE) => loadOf(list(text), scale, set)
const bands = (text: string) => load(text).strings.map(each => each.band).reverse()
const cautions = (text: string) => cautionsOf(list(text), SCALE, load(text)).map(each => each.text)

describe('bands', () => {
  // The cuts as agreed: green 70 to 113 percent, amber to 127 and 65 to 70, slack below, red beyond or from 75 percent of the wire.
  it.each<[number, number | null, Band]>([
    [1, null, 'green'], [0.70, null, 'green'], [1.13, 0.64, 'green'], [1.1301, null, 'amber'], [1.27, null, 'amber'], [1.2701, null, 'red'],
    [0.6999, null, 'amber'], [0.65, null, 'amber'], [0.6499, null, 'slack'], [1, 0.65, 'amber'], [1, 0.75, 'red'], [0.6, 0.8, 'red'],
  ])('%f of the design and %s of the wire: %s', (share, stress, band) => expect(bandOf(share, stress)).toBe(band))

  it('takes each string of a tuning by itself', () => {
    expect(bands('E2 A2 D3 G3 B3 E4')).toEqual(Array(6).fill('green'))
    expect(bands('D2 G2 D3 G3 B3 D4')).toEqual(Array(6).fill('green'))
    // Two half steps up are 126 percent; the wound third then carries 77 percent of its core's least strength.
    expect(bands('E2 A2 E3 A3 C#4 E4')).toEqual(['green', 'green', 'amber', 'red', 'amber', 'green'])
    // Four half steps down are 63 percent; a half step up on the second is 112.
    expect(bands('C2 G2 D3 G3 C4 D4')).toEqual(['slack', 'green', 'green', 'green', 'green', 'green'])
  })

  it('is red in all above 110 percent', () => {
    expect(load('E2 A2 E3 A3 C#4 E4').band).toBe('red')
    expect(load('E2 B2 E3 G#3 B3 E4').band).toBe('red')
    expect(load('E2 A2 D3 G3 C4 F4').band).toBe('green')
  })

  it('is slacker on a shorter scale, with the square of its length', () =>
    expect(load('E2 A2 D3 G3 B3 E4', LIGHT_SET, 628.65).share).toBeCloseTo((628.65 / 647.7) ** 2, 9))
})

describe('better gauges', () => {
  it('are in the green themselves, for every string out of it, where the trade sells any', () => {
    for (const text of ['C2 G2 D3 A3 E4 G4', 'E2 A2 E3 A3 C#4 E4', 'C2 G2 C3 G3 C4 E4', 'B1 E2 A2 D3 F#3 B3']) {
      for (const { better, gauge, designPounds, band } of load(text).strings) {
        if (band === 'green') expect(better).toBeNull()
        else if (better) {
          expect(bandOf(better.pounds / designPounds, null)).toBe('green')
          expect(better.direction).toBe(better.gauge.inches < gauge.inches ? 'lighter' : 'heavier')
        }
      }
    }
  })

  it('go lighter for what is tuned up and heavier for what is tuned down', () => {
    const strings = load('C2 G2 D3 A3 E4 G4').strings
    expect(strings.filter(each => each.better).map(each => [each.string, each.better!.direction])).toEqual([
      [2, 'lighter'], [3, 'lighter'], [6, 'heavier']])
    // G4 is beyond plain steel of any thickness at this scale, since its breaking pitch does not depend on the gauge.
    expect(strings[0]).toMatchObject({ band: 'red', better: null })
  })

  it('are named as the trade names them', () => {
    expect([gaugeLabel({ kind: 'plain', inches: 0.012 }), gaugeLabel({ kind: 'bronze', inches: 0.024 }), gaugeLabel({ kind: 'plain', inches: 0.0105 })]).toEqual(['.012', '.024 bronze', '.0105'])
    expect(gaugesOf('plain').every(gauge => unitWeight(gauge.kind, gauge.inches) !== null)).toBe(true)
    expect([...gaugesOf('bronze'), ...gaugesOf('nickel')].every(gauge => unitWeight(gauge.kind, gauge.inches) !== null)).toBe(true)
  })
})

describe('cautions', () => {
  it('are silent in standard', () => expect(cautions('E2 A2 D3 G3 B3 E4')).toEqual([]))

  it('say what would break, what the instrument bears and what sounds the same', () => {
    const [first, second, ...rest] = cautions('E2 A2 E3 A3 C#4 E4')
    expect(first).toMatch(/^All strings together pull 18\d pounds, 113 percent .* ask a repairer/)
    expect(second).toMatch(/^String 3 would carry 77 percent of what its steel is sure to bear: don’t tune this gauge there\. A lighter string/)
    expect(rest.join(' ')).toMatch(/String 4 carries 126 percent .* raise it slowly, in small steps, your face turned away/)
    // Common practice: open A is played as open G with a capo at 2.
    expect(rest.at(-1)).toBe('D G D G B D with a capo at fret 2 sounds the same and spares the strings.')
  })

  it('find the capo that spares the strings most', () => {
    // Common practice: open A as open G and capo 2, open E as open D and capo 2; a step higher, one fret more.
    expect(capoAlternative(list('E2 B2 E3 G#3 B3 E4'), SCALE, LIGHT_SET)).toEqual({ capo: 2, strings: list('D2 A2 D3 F#3 A3 D4') })
    expect(capoAlternative(list('F2 Bb2 F3 Bb3 D4 F4'), SCALE, LIGHT_SET)).toEqual({ capo: 3, strings: list('D2 G2 D3 G3 B3 D4') })
    expect(capoAlternative(list('E1 A2 D3 G3 B3 E5'), SCALE, LIGHT_SET)).toBeNull()
  })

  it('say where no gauge helps', () => expect(cautions('C2 G2 D3 A3 E4 G4').join(' ')).toContain('No other gauge bears it at this length.'))

  it('send to a repairer before heavier strings', () => {
    const own = cautions('C2 G2 D3 G3 C4 D4')
    expect(own[0]).toMatch(/^String 6 goes slack at 63 percent .* A heavier string, .05\d bronze, would be at/)
    expect(own.at(-1)).toMatch(/^Ask a repairer before you fit a heavier string 6/)
  })

  it('sum up in a line', () => {
    expect(loadSentence(load('C2 G2 D3 G3 C4 D4'))).toBe('89 percent of the set’s tension, one string slack')
    expect(loadSentence(load('E2 A2 E3 A3 C#4 E4'))).toBe('113 percent of the set’s tension, one string in the red')
  })
})

it('has no set for other numbers of strings, and refuses one that does not fit', () => {
  expect(usualSet(list('G3 D4 A4 E5'))).toBeNull()
  expect(usualSet(STANDARD_TUNING)).toBe(LIGHT_SET)
  expect(() => loadOf(list('G3 D4 A4 E5'), SCALE, LIGHT_SET)).toThrow(RangeError)
  expect(SETS).toContain(MEDIUM_SET)
  expect(coreInches({ kind: 'bronze', inches: 0.053 })).toBeNull()
})
