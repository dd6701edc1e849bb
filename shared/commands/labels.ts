import { readBinding } from './binding'
import type { Platform } from './keys'

const NAMES: Readonly<Record<string, string>> = {
  'ArrowUp': '↑', 'ArrowDown': '↓', 'ArrowLeft': '←', 'ArrowRight': '→', 'PageUp': 'Page Up', 'PageDown': 'Page Down', 'Escape': 'Esc', ' ': 'Space',
}
const MAC_NAMES: Readonly<Record<string, string>> = { Backspace: '⌫', Delete: '⌦', Enter: '↩', Escape: 'esc' }
/** In the order in which macOS menus show them (Apple Human Interface Guidelines, Keyboards). */
const MAC_MODIFIERS = [['Jump', '⌥'], ['Shift', '⇧'], ['Mod', '⌘']] as const

/** A binding as people read it: "Ctrl K", on macOS "⌘K". Plain letters stay small, as they are typed without Shift. */
export function keyLabel(binding: string, platform: Platform = 'other'): string {
  const { held, key } = readBinding(binding)
  const name = (platform === 'mac' ? MAC_NAMES[key] : undefined) ?? NAMES[key] ?? (held.length && key.length === 1 ? key.toUpperCase() : key)
  if (platform === 'mac') return MAC_MODIFIERS.filter(([modifier]) => held.includes(modifier)).map(([, sign]) => sign).join('') + name
  return [...held.map(modifier => (modifier === 'Shift' ? 'Shift' : 'Ctrl')), name].join(' ')
}
