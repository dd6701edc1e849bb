import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import ChordDiagram from '../../../components/tuning/ChordDiagram.vue'
import TensionBar from '../../../components/tuning/TensionBar.vue'
import { STEEL_STRING_GUITAR, STANDARD_TUNING } from '../../../shared/score/create'
import type { Capo } from '../../../shared/score/types'
import { boardOf } from '../../../shared/tunings/board'
import { loadOf } from '../../../shared/tunings/load'
import { LIGHT_SET } from '../../../shared/tunings/sets'
import type { Shape } from '../../../shared/tunings/shape'

const board = (capos: Capo[] = []) => boardOf({ strings: STANDARD_TUNING, capos, instrument: STEEL_STRING_GUITAR })
const shape = (more: Partial<Shape>): Shape =>
  ({ frets: [0, 1, 0, 2, 3, null], fingers: [0, 1, 0, 2, 3, 0], barre: null, span: 69, inversion: 0, doubled: [], missing: [], open: 2, cost: 5, ...more })
const draw = (own: Shape, more: object = {}) => mount(ChordDiagram, { props: { shape: own, board: board(), label: 'C', ...more } })
const number = (wrapper: ReturnType<typeof draw>, selector: string, name: string) => wrapper.findAll(selector).map(each => Number(each.attributes(name)))

// C major x 3 2 0 1 0, drawn as chord boxes are (common practice): the sixth string at the left, the nut on top, × for a string left out.
describe('a chord diagram', () => {
  it('has the thickest string at the left and higher frets further down', () => {
    const wrapper = draw(shape({}))
    const dots = wrapper.findAll('circle.fill-ink').map(each => ({ x: Number(each.attributes('cx')), y: Number(each.attributes('cy')) }))
    const [first, second, third] = dots
    expect(first!.x).toBeGreaterThan(second!.x)
    expect(second!.x).toBeGreaterThan(third!.x)
    expect(third!.y - second!.y).toBe(second!.y - first!.y)
    expect(number(wrapper, 'circle.stroke-verdigris', 'cx')).toHaveLength(2)
    expect(wrapper.findAll('text').map(each => each.text())).toEqual(['1', '2', '3', '×'])
  })

  it('turns round for the left-handed', () => {
    const [right, left] = [draw(shape({})), draw(shape({}), { leftHanded: true })]
    expect(number(left, 'circle.fill-ink', 'cx')[0]).toBeLessThan(number(left, 'circle.fill-ink', 'cx')[2]!)
    expect(number(right, 'circle.fill-ink', 'cx')[0]).toBeGreaterThan(number(right, 'circle.fill-ink', 'cx')[2]!)
  })

  it('names its first fret when it lies up the neck, and draws a barre over its strings', () => {
    const wrapper = draw(shape({ frets: [8, 8, 9, 10, 10, 8], fingers: [1, 1, 2, 4, 3, 1], barre: { fret: 8, fromString: 6, toString: 1 } }))
    expect(wrapper.findAll('text')[0]!.text()).toBe('8')
    const barre = wrapper.find('line[stroke-linecap=round]')
    expect(Number(barre.attributes('x2')) - Number(barre.attributes('x1'))).toBe(5 * 15)
    expect(wrapper.find('line.stroke-ink:not([stroke-linecap])').exists()).toBe(false)
  })

  it('counts from the capo', () => {
    const wrapper = draw(shape({ barre: null }), { board: board([{ fret: 5 }]) })
    expect(number(wrapper, 'circle.fill-ink', 'cy')).toEqual(number(draw(shape({})), 'circle.fill-ink', 'cy'))
  })
})

describe('a tension bar', () => {
  const load = (pitches: string) => loadOf(pitches.split(' ').reverse().map(pitch => ({ pitch })), 647.7, LIGHT_SET).strings
  // T goes with the square of the frequency (Mersenne): four half steps down leave 2^(−8/12) = 63 percent, two up are 126, one up 112.
  it.each([
    ['C2 G2 D3 G3 C4 D4', 6, '63 %', 'slack'], ['C2 G2 D3 G3 C4 D4', 2, '112 %', 'as meant'],
    ['E2 B2 E3 G#3 B3 E4', 5, '126 %', 'tight'], ['C2 G2 D3 A3 E4 G4', 2, '178 %', 'too tight'], ['D2 A2 D3 E3 A3 D4', 3, '71 %', 'as meant'],
  ])('says it in words: %s, string %i, %s %s', (pitches, string, percent, word) => {
    const text = mount(TensionBar, { props: { load: load(pitches)[string - 1]! } }).text()
    expect(text).toContain(percent)
    expect(text).toContain(word)
  })
})
