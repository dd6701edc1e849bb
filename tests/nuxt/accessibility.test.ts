import { readdirSync } from 'node:fs'
import { mount, RouterLinkStub } from '@vue/test-utils'
import axe from 'axe-core'
import { afterEach, describe, expect, it } from 'vitest'
import { defineComponent, h, type Component, type VNode } from 'vue'
import UiButton from '~/components/ui/UiButton.vue'
import UiChoice from '~/components/ui/UiChoice.vue'
import UiDialog from '~/components/ui/UiDialog.vue'
import UiEmpty from '~/components/ui/UiEmpty.vue'
import UiField from '~/components/ui/UiField.vue'
import UiIcon from '~/components/ui/UiIcon.vue'
import UiKey from '~/components/ui/UiKey.vue'
import UiMenu from '~/components/ui/UiMenu.vue'
import UiNotice from '~/components/ui/UiNotice.vue'
import UiProgress from '~/components/ui/UiProgress.vue'
import UiSelect from '~/components/ui/UiSelect.vue'
import UiSortHeader from '~/components/ui/UiSortHeader.vue'
import UiSpinner from '~/components/ui/UiSpinner.vue'
import UiSwitch from '~/components/ui/UiSwitch.vue'
import UiTime from '~/components/ui/UiTime.vue'
import UiUndoBar from '~/components/ui/UiUndoBar.vue'

/**
 * Every component of components/ui, in the states in which people meet it, is checked by axe-core, the rules of WCAG 2.2 A and AA
 * (https://github.com/dequelabs/axe-core/blob/develop/doc/rule-descriptions.md). Contrast needs real drawing: the browser tests have it.
 */
const options = [{ value: 'day', label: 'Day' }, { value: 'night', label: 'Night' }]
const sort = { by: 'title', down: true }

const states: Record<string, () => VNode[]> = {
  UiButton: () => [
    h(UiButton, () => 'Keep it'), h(UiButton, { kind: 'primary', busy: true }, () => 'Keeping…'), h(UiButton, { disabled: true }, () => 'Keep it'),
    h(UiButton, { label: 'Close' }, () => h(UiIcon, { name: 'close' })), h(UiButton, { to: '/folio' }, () => 'Open the folio'),
  ],
  UiChoice: () => [h(UiChoice, { label: 'Palette', options, modelValue: 'day', hint: 'By day or by night.' })],
  UiDialog: () => [h(UiDialog, { title: 'Rename', open: true }, { default: () => 'What it is called', actions: () => h(UiButton, () => 'Rename') })],
  UiEmpty: () => [h('h1', 'Folio'), h(UiEmpty, { title: 'Nothing here yet' }, () => 'An arrangement starts with a tuning.')],
  UiField: () => [
    h(UiField, { label: 'Title', modelValue: '' }), h(UiField, { label: 'Tempo', modelValue: 80, hint: 'Beats a minute.', error: 'Too fast.', optional: true }),
  ],
  UiIcon: () => [h(UiIcon, { name: 'done' })],
  UiKey: () => [h(UiKey, { label: 'Ctrl K' })],
  UiMenu: () => [h(UiMenu, { label: 'Actions', items: [{ id: 'rename', label: 'Rename…' }, { id: 'delete', label: 'Delete', danger: true }] }, () => 'Actions')],
  UiNotice: () => (['error', 'caution', 'info', 'done'] as const).map(kind => h(UiNotice, { kind, title: 'The folio could not be loaded.' }, () => 'Try again.')),
  UiProgress: () => [h(UiProgress, { label: 'Reading', value: 0.4 })],
  UiSelect: () => [h(UiSelect, { label: 'Palette', options, modelValue: 'day', error: 'Not that one.' })],
  UiSortHeader: () => [h('table', [h('thead', [h('tr', [h(UiSortHeader, { label: 'Title', column: 'title', sort }), h(UiSortHeader, { label: 'Bars', column: 'bars', sort })])])])],
  UiSpinner: () => [h(UiSpinner, { label: 'Fetching' })],
  UiSwitch: () => [h(UiSwitch, { label: 'Click', modelValue: true, hint: 'On every beat.' }), h(UiSwitch, { label: 'Sound notes', modelValue: false })],
  UiTime: () => [h(UiTime, { at: '2024-05-01T10:00:00Z' })],
  UiUndoBar: () => [h(UiUndoBar, { message: '“Low Water” is deleted.' })],
}

const page = (nodes: () => VNode[]): Component => defineComponent({ render: () => h('main', nodes()) })

async function problemsOf(element: Element): Promise<string[]> {
  const { violations } = await axe.run(element, {
    runOnly: ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'],
    rules: { 'color-contrast': { enabled: false } },
  })
  return violations.map(({ id, nodes }) => `${id}: ${nodes.map(({ html }) => html).join(' ')}`)
}

afterEach(() => {
  document.body.innerHTML = ''
})

describe('components/ui', () => {
  it('has a check for every component', () => {
    const files = readdirSync('components/ui').filter(name => name.endsWith('.vue')).map(name => name.replace('.vue', ''))
    expect(Object.keys(states).sort()).toEqual(files.sort())
  })

  it.each(Object.keys(states))('%s has no violation', async (name) => {
    const wrapper = mount(page(states[name]!), { attachTo: document.body, global: { stubs: { RouterLink: RouterLinkStub } } })
    await wrapper.vm.$nextTick()
    expect(await problemsOf(wrapper.element)).toEqual([])
    const button = wrapper.find('[aria-haspopup=menu]')
    if (button.exists()) {
      await button.trigger('click')
      expect(await problemsOf(wrapper.element)).toEqual([])
    }
    wrapper.unmount()
  })

  it('is a check that can fail', async () => {
    document.body.innerHTML = '<main><button></button><input><img src="x.png"></main>'
    expect(await problemsOf(document.body)).toHaveLength(3)
  })
})
