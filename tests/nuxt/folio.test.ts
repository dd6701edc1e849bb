import { mount } from '@vue/test-utils'
import { createPinia, setActivePinia } from 'pinia'
import { beforeEach, describe, expect, it, vi } from 'vitest'
import type { ArrangementSummary } from '#shared/schemas/arrangement'
import FolioTuning from '~/components/folio/FolioTuning.vue'
import { useSubmit } from '~/composables/useSubmit'
import { useFolio } from '~/stores/folio'

const strings = ['D4', 'C4', 'G3', 'D3', 'G2', 'C2'].map(pitch => ({ pitch }))
const item: ArrangementSummary = { id: 'a', title: 'Ebb', strings, capos: [], bars: 8, state: 'draft', role: 'arranger', changedAt: '2026-01-01T00:00:00Z' }
const answer = vi.fn()
vi.stubGlobal('$fetch', answer)
beforeEach(() => {
  setActivePinia(createPinia())
  answer.mockReset()
})
const titles = (folio: ReturnType<typeof useFolio>) => folio.items.map(({ title }) => title)
async function loaded() {
  const folio = useFolio()
  answer.mockResolvedValueOnce({ items: [item, { ...item, id: 'b', title: 'Flow' }] })
  await folio.load()
  return folio
}

describe('the folio’s store', () => {
  it('shows a new title before the server has answered', async () => {
    const folio = await loaded()
    answer.mockReturnValueOnce(new Promise(() => {}))
    void folio.patch(folio.items[0]!, { title: 'Slack' })
    expect(titles(folio)).toEqual(['Slack', 'Flow'])
    expect(answer).toHaveBeenLastCalledWith('/api/arrangements/a', { method: 'PATCH', body: { title: 'Slack' } })
  })
  it('puts the old title back when the server refuses', async () => {
    const folio = await loaded()
    answer.mockRejectedValueOnce(new Error('no'))
    await expect(folio.patch(folio.items[0]!, { title: 'Slack' })).rejects.toThrow('no')
    expect(folio.items[0]).toEqual(item)
  })
  it('takes a deleted row away, and back when that failed', async () => {
    const folio = await loaded()
    answer.mockRejectedValueOnce(new Error('no'))
    await expect(folio.remove(item)).rejects.toThrow('no')
    expect(titles(folio).sort()).toEqual(['Ebb', 'Flow'])
    expect(folio.deleted).toBeNull()
  })
  it('keeps the way back after a deletion until it was restored', async () => {
    const folio = await loaded()
    await folio.remove(item)
    expect(titles(folio)).toEqual(['Flow'])
    expect(folio.deleted).toEqual(item)
    answer.mockRejectedValueOnce(new Error('no'))
    await expect(folio.restore(item)).rejects.toThrow('no')
    expect(folio.deleted).toEqual(item)
    await folio.restore(item)
    expect(titles(folio).sort()).toEqual(['Ebb', 'Flow'])
    expect(folio.deleted).toBeNull()
  })
})

describe('a tuning in the folio', () => {
  // From standard E A D G B E: C is four half steps below E, C one above B (counted on the keyboard).
  it('is read out with its changes, and shows them below the letters', () => {
    const wrapper = mount(FolioTuning, { props: { strings, capos: [{ fret: 2 }, { fret: 5, strings: [1, 2] }] } })
    expect(wrapper.get('.sr-only').text()).toBe('C G D G C D, string 6 down 4, string 5 down 2, string 2 up 1, string 1 down 2')
    expect(wrapper.get('[aria-hidden]').text().replace(/\s+/g, '')).toBe('C−4G−2DGC+1D−2')
    expect(wrapper.text()).toContain('capo 2, capo 5 (partial)')
  })
  it('compares no other instrument with a guitar', () => {
    const wrapper = mount(FolioTuning, { props: { strings: ['E5', 'A4', 'D4', 'G3'].map(pitch => ({ pitch })) } })
    expect(wrapper.get('.sr-only').text()).toBe('G D A E')
  })
})

describe('sending a form', () => {
  const refusal = (field?: string) => Object.assign(new Error('x'), { statusCode: 422, data: { data: { code: 'refused', message: 'Not that.', field } } })
  it('sends nothing while a field is wrong', async () => {
    const send = vi.fn()
    const { submit, errors } = useSubmit({ title: () => 'Write a title.' }, send)
    await submit()
    expect(send).not.toHaveBeenCalled()
    expect(errors.value.title).toBe('Write a title.')
  })
  it('puts a refusal beside its field, or above the button where the form has no such field', async () => {
    const send = vi.fn().mockRejectedValueOnce(refusal('title')).mockRejectedValueOnce(refusal('strings'))
    const { submit, errors, general } = useSubmit({ title: () => undefined }, send)
    await submit()
    expect(errors.value.title).toBe('Not that.')
    expect(general.value).toBeNull()
    await submit()
    expect(errors.value.title).toBeUndefined()
    expect(general.value?.message).toBe('Not that.')
  })
  it('sends once at a time', async () => {
    let finish = () => {}
    const send = vi.fn(() => new Promise<void>(resolve => (finish = resolve)))
    const { submit, busy } = useSubmit({}, send)
    const first = submit()
    await submit()
    expect(send).toHaveBeenCalledOnce()
    expect(busy.value).toBe(true)
    finish()
    await first
    expect(busy.value).toBe(false)
  })
})
