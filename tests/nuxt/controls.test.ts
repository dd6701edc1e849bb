import { mount, type VueWrapper } from '@vue/test-utils'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { defineComponent, h, nextTick, ref } from 'vue'
import UiButton from '~/components/ui/UiButton.vue'
import UiDialog from '~/components/ui/UiDialog.vue'
import UiField from '~/components/ui/UiField.vue'
import UiMenu from '~/components/ui/UiMenu.vue'
import UiNotice from '~/components/ui/UiNotice.vue'
import UiSelect from '~/components/ui/UiSelect.vue'
import UiSortHeader from '~/components/ui/UiSortHeader.vue'
import UiUndoBar from '~/components/ui/UiUndoBar.vue'

const attach = { attachTo: document.body }
let mounted: VueWrapper | undefined
afterEach(() => mounted?.unmount())

describe('a field', () => {
  it('names and describes its input by label, hint and error', () => {
    mounted = mount(UiField, { props: { label: 'Title', hint: 'As printed.', error: 'Give it one.', modelValue: '' }, attrs: { name: 'title', class: 'wide' }, ...attach })
    const input = mounted.get('input').element
    expect(input.labels?.[0]?.textContent?.trim()).toBe('Title')
    const described = input.getAttribute('aria-describedby')!.split(' ').map(id => document.getElementById(id)?.textContent?.trim())
    expect(described).toEqual(['As printed.', 'Give it one.'])
    expect(input.getAttribute('aria-invalid')).toBe('true')
    expect(input.name).toBe('title')
    expect(input.className).toBe('control')
    expect(mounted.classes()).toContain('wide')
  })
  it('says nothing of errors where there is none', () => {
    mounted = mount(UiField, { props: { label: 'Title', modelValue: 'Low Water' } })
    expect(mounted.get('input').attributes()).not.toHaveProperty('aria-invalid')
    expect(mounted.get('input').attributes()).not.toHaveProperty('aria-describedby')
  })
  it('hands what is chosen up, in its own type', async () => {
    mounted = mount(UiSelect, { props: { label: 'Fret', modelValue: 1, options: [{ value: 1, label: 'one' }, { value: 2, label: 'two' }] } })
    await mounted.get('select').setValue('2')
    expect(mounted.emitted('update:modelValue')).toEqual([[2]])
  })
})

describe('a button', () => {
  it('refuses presses while it is busy, but keeps the focus', async () => {
    const pressed = vi.fn()
    mounted = mount(UiButton, { props: { busy: true }, attrs: { onClick: pressed }, ...attach })
    mounted.element.focus()
    await mounted.trigger('click')
    expect(pressed).not.toHaveBeenCalled()
    expect(document.activeElement).toBe(mounted.element)
    await mounted.setProps({ busy: false })
    await mounted.trigger('click')
    expect(pressed).toHaveBeenCalledOnce()
  })
})

describe('a dialog', () => {
  const open = ref(false)
  const Page = defineComponent(() => () => [
    h('button', { id: 'opener', onClick: () => (open.value = true) }, 'Rename'),
    h(UiDialog, { 'title': 'Rename', 'open': open.value, 'onUpdate:open': (now: boolean) => (open.value = now) }, () => h('input', { id: 'inside', autofocus: true })),
  ])
  it('takes the focus, closes at Escape and gives the focus back', async () => {
    mounted = mount(Page, attach)
    const opener = mounted.get<HTMLButtonElement>('#opener')
    opener.element.focus()
    await opener.trigger('click')
    await nextTick()
    const dialog = mounted.get('dialog')
    expect(dialog.element.open).toBe(true)
    expect(document.activeElement?.id).toBe('inside')
    await dialog.trigger('cancel')
    expect(dialog.element.open).toBe(false)
    expect(open.value).toBe(false)
    expect(document.activeElement?.id).toBe('opener')
  })
})

describe('a menu', () => {
  // The menu button of the WAI-ARIA Authoring Practices, https://www.w3.org/WAI/ARIA/apg/patterns/menu-button/
  const items = [{ id: 'rename', label: 'Rename…' }, { id: 'duplicate', label: 'Duplicate' }, { id: 'delete', label: 'Delete' }]
  const build = () => mount(UiMenu, { props: { label: 'Actions', items }, slots: { default: 'Actions' }, ...attach })
  const focused = () => document.activeElement?.textContent?.trim()
  it('opens by arrow, moves round, by Home, End and first letter', async () => {
    mounted = build()
    const press = (key: string) => mounted!.get('[role=menu]').trigger('keydown', { key })
    await mounted.get('button').trigger('keydown', { key: 'ArrowDown' })
    await nextTick()
    expect(focused()).toBe('Rename…')
    await press('ArrowUp')
    expect(focused()).toBe('Delete')
    await press('ArrowDown')
    expect(focused()).toBe('Rename…')
    await press('End')
    expect(focused()).toBe('Delete')
    await press('Home')
    expect(focused()).toBe('Rename…')
    await press('d')
    expect(focused()).toBe('Duplicate')
    await press('d')
    expect(focused()).toBe('Delete')
  })
  it('closes at Escape and after a choice, with the focus on its button', async () => {
    mounted = build()
    await mounted.get('button').trigger('click')
    await nextTick()
    await mounted.get('[role=menu]').trigger('keydown', { key: 'Escape' })
    expect(mounted.find('[role=menu]').exists()).toBe(false)
    expect(document.activeElement).toBe(mounted.get('button').element)
    await mounted.get('button').trigger('click')
    await nextTick()
    await mounted.findAll('[role=menuitem]')[1]!.trigger('click')
    expect(mounted.emitted('select')).toEqual([['duplicate']])
    expect(mounted.get('button').attributes('aria-expanded')).toBe('false')
  })
})

describe('the undo bar', () => {
  beforeEach(() => void vi.useFakeTimers())
  afterEach(() => void vi.useRealTimers())
  const build = () => mount(UiUndoBar, { props: { message: 'Deleted.' }, ...attach })
  it('has the focus, and stays as long as it has', async () => {
    mounted = build()
    expect(document.activeElement?.textContent?.trim()).toBe('Undo')
    await vi.advanceTimersByTimeAsync(60_000)
    expect(mounted.emitted('close')).toBeUndefined()
  })
  it('goes some time after it was left, at least ten seconds', async () => {
    mounted = build()
    ;(document.activeElement as HTMLElement).blur()
    await vi.advanceTimersByTimeAsync(10_000)
    expect(mounted.emitted('close')).toBeUndefined()
    await vi.advanceTimersByTimeAsync(10_000)
    expect(mounted.emitted('close')).toHaveLength(1)
  })
  it('takes back once, not again while that is under way', async () => {
    mounted = build()
    await mounted.get('button').trigger('click')
    await mounted.setProps({ busy: true })
    await mounted.get('button').trigger('click')
    expect(mounted.emitted('undo')).toHaveLength(1)
  })
})

describe('what is said', () => {
  it('reads errors out at once and tells every kind in words', () => {
    const notice = (kind: 'error' | 'caution') => mount(UiNotice, { props: { kind }, slots: { default: 'Text.' } })
    expect(notice('error').attributes('role')).toBe('alert')
    expect(notice('error').text()).toMatch(/^Error:/)
    expect(notice('caution').attributes('role')).toBeUndefined()
    expect(notice('caution').text()).toMatch(/^Caution:/)
  })
  it.each([
    ['title', false, 'ascending'], ['title', true, 'descending'], ['bars', true, 'none'],
  ] as const)('sorts by %s, down %s: %s', (by, down, expected) => {
    mounted = mount(UiSortHeader, { props: { label: 'Title', column: 'title', sort: { by, down } } })
    expect(mounted.attributes('aria-sort')).toBe(expected)
  })
})
