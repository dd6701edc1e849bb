import { mount } from '@vue/test-utils'
import { createPinia, setActivePinia } from 'pinia'
import { beforeEach, describe, expect, it } from 'vitest'
import { contextOfTarget, useKeyboard } from '../../../composables/useKeyboard'
import { createScore } from '../../../shared/score/create'
import { useEditorStore } from '../../../stores/editor'

document.body.innerHTML = `
  <div data-context="score" tabindex="0"><svg></svg></div>
  <button>Play</button><input type="text"><input type="range"><textarea></textarea><p>words</p>
  <dialog open><button id="inside">OK</button></dialog>`
const at = (selector: string) => document.querySelector(selector)

/** The desk's listener, as a component sets it up. */
function listener(): (event: KeyboardEvent) => void {
  let onKey = (_event: KeyboardEvent) => {}
  mount({
    setup() {
      onKey = useKeyboard()
      return () => null
    },
  })
  return onKey
}

describe('where a key belongs', () => {
  it.each([
    ['[data-context=score]', ' ', 'score'],
    ['svg', '5', 'score'],
    ['p', '?', 'desk'],
    ['button', '?', 'desk'],
    ['button', ' ', null],
    ['input[type=range]', 'ArrowRight', null],
    ['input[type=text]', 'k', null],
    ['textarea', '?', null],
    ['#inside', '?', null],
  ])('%s, %s: %s', (selector, key, context) => expect(contextOfTarget(at(selector), key)).toBe(context))
})

describe('keys on the desk', () => {
  beforeEach(() => setActivePinia(createPinia()))
  const press = (init: KeyboardEventInit, selector = '[data-context=score]') => {
    const editor = useEditorStore()
    if (!editor.state) editor.open(createScore({ title: 'Test' }, () => 'b0'))
    const onKey = listener()
    const event = new KeyboardEvent('keydown', { bubbles: true, cancelable: true, ...init })
    at(selector)!.addEventListener('keydown', onKey as EventListener, { once: true })
    at(selector)!.dispatchEvent(event)
    return { editor, event }
  }
  const fret = () => useEditorStore().score?.bars[0]?.voices.upper?.events[0]?.notes[0]?.fret

  it('enters a fret, and a second digit joins it', () => {
    press({ key: '1', code: 'Digit1' })
    const { event } = press({ key: '2', code: 'Digit2' })
    expect(fret()).toBe(12)
    expect(event.defaultPrevented).toBe(true)
  })

  it('leaves to the browser what means nothing here', () => {
    for (const init of [{ key: 'Tab', code: 'Tab' }, { key: 'r', code: 'KeyR', ctrlKey: true }, { key: 'F5', code: 'F5' }, { key: 't', code: 'KeyT', ctrlKey: true }]) {
      expect(press(init).event.defaultPrevented).toBe(false)
    }
    expect(fret()).toBeUndefined()
  })

  it('leaves composition alone', () => {
    expect(press({ key: '5', code: 'Digit5', isComposing: true }).event.defaultPrevented).toBe(false)
    expect(fret()).toBeUndefined()
  })

  it('types nothing into the score from elsewhere', () => {
    press({ key: '5', code: 'Digit5' }, 'p')
    expect(fret()).toBeUndefined()
  })
})
