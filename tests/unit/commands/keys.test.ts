import { describe, expect, it } from 'vitest'
import { chordOf, commandForKey, conflictsOf, isReserved, type KeyLike, type Platform } from '../../../shared/commands/keys'
import { keyLabel } from '../../../shared/commands/labels'

type Press = Partial<KeyLike> & { readonly altGraph?: boolean }

const press = ({ altGraph, ...event }: Press): KeyLike => ({
  key: '', code: '', ctrlKey: false, altKey: false, shiftKey: false, metaKey: false,
  getModifierState: name => name === 'AltGraph' && Boolean(altGraph), ...event,
})
const meant = (event: Press, platform: Platform = 'other', context: 'score' | 'desk' = 'score') => commandForKey(press(event), context, undefined, platform)?.id ?? null

/** What keyboards deliver (W3C UI Events: key is what is typed, code the place of the key). Layouts as Windows and Linux ship them. */
describe('the key pressed', () => {
  it.each<[string, Press, string | null]>([
    // US
    ['US 1', { key: '1', code: 'Digit1' }, 'fret.1'],
    ['US pad 7', { key: '7', code: 'Numpad7' }, 'fret.7'],
    ['US pad 7, Num Lock off', { key: 'Home', code: 'Numpad7' }, 'cursor.barStart'],
    ['US pad .', { key: '.', code: 'NumpadDecimal' }, 'length.dot'],
    ['US Shift+1', { key: '!', code: 'Digit1', shiftKey: true }, null],
    ['US h', { key: 'h', code: 'KeyH' }, 'note.hammerOn'],
    ['US Shift+H', { key: 'H', code: 'KeyH', shiftKey: true }, 'length.half'],
    ['US h under Caps Lock', { key: 'H', code: 'KeyH' }, 'note.hammerOn'],
    ['US Shift+H under Caps Lock', { key: 'h', code: 'KeyH', shiftKey: true }, 'length.half'],
    ['US <', { key: '<', code: 'Comma', shiftKey: true }, 'note.harmonic'],
    ['US ?', { key: '?', code: 'Slash', shiftKey: true }, 'desk.keys'],
    ['US space', { key: ' ', code: 'Space' }, 'desk.play'],
    ['US Shift+Enter', { key: 'Enter', code: 'Enter', shiftKey: true }, 'cursor.advanceLike'],
    ['US pad Enter', { key: 'Enter', code: 'NumpadEnter' }, 'cursor.advance'],
    ['Ctrl Z', { key: 'z', code: 'KeyZ', ctrlKey: true }, 'history.undo'],
    ['Ctrl Shift Z', { key: 'Z', code: 'KeyZ', ctrlKey: true, shiftKey: true }, 'history.redo'],
    ['Ctrl →', { key: 'ArrowRight', code: 'ArrowRight', ctrlKey: true }, 'cursor.nextBar'],
    ['Ctrl Shift →', { key: 'ArrowRight', code: 'ArrowRight', ctrlKey: true, shiftKey: true }, 'selection.nextBar'],
    ['Alt →', { key: 'ArrowRight', code: 'ArrowRight', altKey: true }, null],
    ['the Windows key with z', { key: 'z', code: 'KeyZ', metaKey: true }, null],
    // French (AZERTY): the digit row types signs, digits need Shift; letters stand elsewhere.
    ['French 3', { key: '"', code: 'Digit3' }, 'fret.3'],
    ['French Shift+3', { key: '3', code: 'Digit3', shiftKey: true }, 'fret.3'],
    ['French a-place w', { key: 'w', code: 'KeyZ' }, 'length.whole'],
    ['French z-place', { key: 'z', code: 'KeyW' }, 'note.rest'],
    ['French Ctrl Z', { key: 'z', code: 'KeyW', ctrlKey: true }, 'history.undo'],
    ['French .', { key: '.', code: 'Comma', shiftKey: true }, 'length.dot'],
    ['French AltGr é: ~', { key: '~', code: 'Digit2', ctrlKey: true, altKey: true, altGraph: true }, null],
    // German (QWERTZ)
    ['German <', { key: '<', code: 'IntlBackslash' }, 'note.harmonic'],
    ['German =', { key: '=', code: 'Digit0', shiftKey: true }, 'note.tie'],
    ['German z', { key: 'z', code: 'KeyY' }, 'note.rest'],
    ['German ?', { key: '?', code: 'Minus', shiftKey: true }, 'desk.keys'],
    ['German pad ,', { key: ',', code: 'NumpadDecimal' }, 'length.dot'],
    // Polish: AltGr with a letter types another letter and is never Ctrl+Alt.
    ['Polish AltGr z', { key: 'ż', code: 'KeyZ', ctrlKey: true, altKey: true, altGraph: true }, null],
    // Russian, Greek, Hebrew: letters by position.
    ['Russian h-place', { key: 'р', code: 'KeyH' }, 'note.hammerOn'],
    ['Russian Shift h-place', { key: 'Р', code: 'KeyH', shiftKey: true }, 'length.half'],
    ['Russian Ctrl z-place', { key: 'я', code: 'KeyZ', ctrlKey: true }, 'history.undo'],
    ['Russian .-place', { key: 'ю', code: 'Period' }, 'length.dot'],
    ['Russian <-place', { key: 'Б', code: 'Comma', shiftKey: true }, 'note.harmonic'],
    ['Russian typed .', { key: '.', code: 'Slash' }, 'length.dot'],
    ['Greek v-place', { key: 'ω', code: 'KeyV' }, 'cursor.otherVoice'],
    ['Hebrew x-place', { key: 'ס', code: 'KeyX' }, 'note.dead'],
    ['Arabic 5', { key: '٥', code: 'Digit5' }, 'fret.5'],
    ['Dvorak p', { key: 'p', code: 'KeyR' }, 'note.pullOff'],
    // Not ours
    ['composing', { key: 'h', code: 'KeyH', isComposing: true }, null],
    ['key code 229', { key: 'h', code: 'KeyH', keyCode: 229 }, null],
    ['a dead key', { key: 'Dead', code: 'BracketLeft' }, null],
    ['Shift alone', { key: 'Shift', code: 'ShiftLeft', shiftKey: true }, null],
    ['Tab', { key: 'Tab', code: 'Tab' }, null],
    ['ñ', { key: 'ñ', code: 'Semicolon' }, null],
  ])('%s', (_, event, id) => expect(meant(event)).toBe(id))

  it.each<[string, Press, string | null]>([
    ['Cmd K', { key: 'k', code: 'KeyK', metaKey: true }, 'desk.palette'],
    ['Ctrl K', { key: 'k', code: 'KeyK', ctrlKey: true }, null],
    ['Option →', { key: 'ArrowRight', code: 'ArrowRight', altKey: true }, 'cursor.nextBar'],
    ['Cmd →', { key: 'ArrowRight', code: 'ArrowRight', metaKey: true }, null],
    ['Cmd Shift Z', { key: 'z', code: 'KeyZ', metaKey: true, shiftKey: true }, 'history.redo'],
    ['Option h types ˙', { key: '˙', code: 'KeyH', altKey: true }, null],
    ['Option n is dead', { key: 'Dead', code: 'KeyN', altKey: true }, null],
    ['Swiss Option + types <', { key: '<', code: 'IntlBackslash', altKey: true }, 'note.harmonic'],
  ])('macOS: %s', (_, event, id) => expect(meant(event, 'mac')).toBe(id))

  it('acts on the score only while it has the focus', () => {
    expect(meant({ key: '5', code: 'Digit5' }, 'other', 'desk')).toBeNull()
    expect(meant({ key: ' ', code: 'Space' }, 'other', 'desk')).toBeNull()
    expect(meant({ key: 's', code: 'KeyS', ctrlKey: true }, 'other', 'desk')).toBe('desk.save')
  })
})

describe('bindings of one’s own', () => {
  const bindings = { 'note.tie': ['r'], 'note.harmonic': [] }

  it('replace those of the command', () => {
    const on = (key: string, code: string) => commandForKey(press({ key, code }), 'score', bindings)?.id ?? null
    expect(on('r', 'KeyR')).toBe('note.tie')
    expect(on('k', 'KeyK')).toBeNull()
    expect(on('n', 'KeyN')).toBeNull()
    expect(on('h', 'KeyH')).toBe('note.hammerOn')
  })

  it('show where two commands would meet', () => {
    expect(conflictsOf(bindings)).toEqual([])
    const clash = conflictsOf({ 'note.tie': ['x'] })
    expect(clash.map(({ key, platform, commands }) => [key, platform, commands.map(command => command.id)])).toEqual([
      ['x', 'other', ['note.tie', 'note.dead']], ['x', 'mac', ['note.tie', 'note.dead']],
    ])
    // Ctrl is both Mod and Jump outside macOS.
    expect(conflictsOf({ 'desk.save': ['Mod+ArrowLeft'] }).map(({ platform }) => platform)).toEqual(['other'])
  })
})

describe('bindings as text', () => {
  it.each([
    ['Mod+n', true], ['Mod+Shift+T', true], ['Mod+1', true], ['Mod+9', true], ['Mod+Tab', true], ['Mod+w', true], ['Mod+q', true],
    ['Mod+0', false], ['Mod+k', false], ['n', false], ['1', false], ['Shift+t', false],
  ])('%s is a browser’s own: %s', (binding, reserved) => expect(isReserved(binding)).toBe(reserved))

  it('know the plus key', () => {
    expect(chordOf('+', 'other')).toBe('+')
    expect(chordOf('Mod++', 'other')).toBe('ctrl++')
    expect(keyLabel('Mod++')).toBe('Ctrl +')
  })

  it.each([
    ['Mod+k', 'Ctrl K', '⌘K'], ['Mod+Shift+z', 'Ctrl Shift Z', '⇧⌘Z'], ['Jump+ArrowLeft', 'Ctrl ←', '⌥←'], ['Shift+w', 'Shift W', '⇧W'],
    ['h', 'h', 'h'], ['Space', 'Space', 'Space'], ['Backspace', 'Backspace', '⌫'], ['Escape', 'Esc', 'esc'], ['?', '?', '?'], ['PageUp', 'Page Up', 'Page Up'],
  ])('%s reads %s, on macOS %s', (binding, other, mac) => {
    expect(keyLabel(binding)).toBe(other)
    expect(keyLabel(binding, 'mac')).toBe(mac)
  })
})
