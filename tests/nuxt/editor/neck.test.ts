import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import { createScore } from '../../../shared/score/create'
import type { Head } from '../../../shared/score/types'
import NeckView from '../../../components/neck/NeckView.vue'
import { fretDistance } from '../../../shared/tunings/neck'

const head = (pitches: string, more: Partial<Head> = {}): Head =>
  ({ ...createScore({ title: 'Test', strings: pitches.split(' ').reverse().map(pitch => ({ pitch })) }, () => 'b').head, ...more })
const show = (more: object) => mount(NeckView, {
  props: { head: head('E2 A2 D3 G3 B3 E4'), fifths: 0, sounding: null, ringing: [], string: 1, label: 'Neck', ...more },
})
const attribute = (wrapper: ReturnType<typeof show>, selector: string, name: string) => wrapper.findAll(selector).map(each => each.attributes(name))
const wires = (wrapper: ReturnType<typeof show>) => attribute(wrapper, 'line.stroke-line-strong', 'x1').map(x => parseFloat(x!))

describe('the neck', () => {
  it.each(['G3 D4 A4 E5', 'C2 G2 D3 G3 C4 D4', 'A1 B1 C2 D2 E2 A2 D3 G3 B3 E4'])('has a line for every string of %s', (pitches) => {
    const wrapper = show({ head: head(pitches) })
    expect(wrapper.findAll('line.stroke-ink-soft')).toHaveLength(pitches.split(' ').length)
  })

  it('spaces the frets as on a real neck', () => {
    const [first, second] = wires(show({}))
    // Two frets of a neck in equal temperament, whatever the width.
    expect(second! / first!).toBeCloseTo(fretDistance(2) / fretDistance(1), 3)
  })

  it('turns round for the left-handed', () => {
    const [right, left] = [wires(show({})), wires(show({ leftHanded: true }))]
    right.forEach((x, index) => expect(x + left[index]!).toBeCloseTo(100, 2))
  })

  it('shows strings that are tuned away from standard in copper', () => {
    const wrapper = show({ head: head('C2 G2 D3 G3 C4 D4') })
    expect(wrapper.findAll('.text-copper').map(each => each.text())).toEqual(['D', 'C', 'G', 'C'])
  })

  it('lays a partial capo over its strings only', () => {
    const wrapper = show({ head: head('E2 A2 D3 G3 B3 E4', { capos: [{ fret: 2, strings: [3, 4, 5] }] }) })
    const capo = wrapper.find('line[stroke-linecap=round]')
    const y = (string: number) => 13 + (string - 1) * 21
    expect(Number(capo.attributes('y1'))).toBeGreaterThan(y(2))
    expect(Number(capo.attributes('y1'))).toBeLessThan(y(3))
    expect(Number(capo.attributes('y2'))).toBeGreaterThan(y(5))
    expect(Number(capo.attributes('y2'))).toBeLessThan(y(6))
  })

  it('shows what sounds in copper and what still rings in verdigris, an open string as 0 at the nut', () => {
    const wrapper = show({ sounding: { string: 3, fret: 4, name: 'B' }, ringing: [{ string: 1, fret: 0, name: 'E' }] })
    expect(wrapper.find('circle.fill-copper').attributes('cy')).toBe('55')
    expect(wrapper.find('circle.fill-verdigris').attributes('cx')).toBe('0.000%')
    expect(wrapper.findAll('text.font-bold').map(each => each.text())).toEqual(['0', 'B'])
  })
})
