import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import NeckReading from '../../../components/neck/NeckReading.vue'
import type { NeckPosition } from '../../../components/neck/neckMark'
import { STEEL_STRING_GUITAR } from '../../../shared/score/create'

const neck = { strings: ['D4', 'A3', 'G3', 'D3', 'A2', 'D2'].map(pitch => ({ pitch })), capos: [] as { fret: number }[], instrument: STEEL_STRING_GUITAR }
const show = (more: object = {}) => mount(NeckReading, {
  props: {
    neck, label: 'Neck', last: 12, read: ({ string, fret }: NeckPosition) => `${string}/${fret}`,
    marks: [{ string: 1, fret: 0, text: 'D', tonic: true, open: true }, { string: 2, fret: 2, text: 'B', tonic: false, open: false }], ...more,
  },
})
async function press(wrapper: ReturnType<typeof show>, ...keys: string[]) {
  await wrapper.find('[role=application]').trigger('focus')
  for (const key of keys) await wrapper.find('[role=application]').trigger('keydown', { key })
  return wrapper.find('[role=status]').text()
}

describe('a neck that is read by keyboard', () => {
  it.each([
    [['ArrowRight', 'ArrowRight', 'ArrowDown'], '2/2'], [['ArrowUp'], '1/0'], [['ArrowLeft'], '1/0'],
    [['End'], '1/12'], [['End', 'ArrowRight', 'Home'], '1/0'], [Array.from({ length: 9 }, () => 'ArrowDown'), '6/0'],
  ])('%j reads %s', async (keys, place) => expect(await press(show(), ...keys)).toBe(place))

  it('begins behind the capo', async () =>
    expect(await press(show({ neck: { ...neck, capos: [{ fret: 2 }] } }), 'ArrowRight', 'Home')).toBe('1/2'))

  it('moves as it is drawn for the left-handed, whose nut is at the right', async () =>
    expect(await press(show({ leftHanded: true }), 'ArrowLeft', 'ArrowLeft', 'ArrowRight')).toBe('1/1'))

  it('keeps the number of a string at the outer side of its name', () => {
    const ends = (wrapper: ReturnType<typeof show>) => wrapper.findAll('.absolute').map(each => each.classes().includes('flex-row-reverse'))
    expect(ends(show())).toEqual(Array(6).fill(false))
    expect(ends(show({ leftHanded: true }))).toEqual(Array(6).fill(true))
  })

  it('asks for the place to be heard, and leaves other keys to the browser', async () => {
    const wrapper = show()
    await press(wrapper, 'ArrowDown', 'Enter', 'Tab')
    expect(wrapper.emitted('hear')).toEqual([[{ string: 2, fret: 0 }]])
  })

  it('reads an open string that is pointed at', async () => {
    const wrapper = show()
    await wrapper.findAll('.absolute')[3]!.find('.rounded-full').trigger('pointerenter')
    expect(wrapper.find('[role=status]').text()).toBe('4/0')
  })

  it('draws a partial capo only over the strings it covers', () => {
    const pieces = (strings?: number[]) => show({ neck: { ...neck, capos: [{ fret: 2, strings }] } }).findAll('line[stroke-width="9"]').length
    expect([pieces(), pieces([3, 4, 5]), pieces([1, 3, 4, 6])]).toEqual([1, 1, 3])
  })

  it('shows tonics in copper, other open strings in verdigris', () => {
    const wrapper = show()
    expect(wrapper.find('.bg-copper').text()).toBe('D')
    expect(wrapper.findAll('circle.fill-sheet')).toHaveLength(1)
  })
})
