/**
 * Keys as data. A binding is written `Mod+Shift+k`: modifiers first, then a character or a name as in
 * KeyboardEvent.key (W3C UI Events). Mod is Ctrl, on macOS Cmd; Jump is Ctrl, on macOS Option (as in text fields there).
 * Shift counts for letters and named keys; for other characters the character typed already says it.
 */
import { readBinding } from './binding'
import type { Command, CommandContext } from './command'
import { commands } from './registry'
import { positionCharacter } from './layout'

export type Platform = 'mac' | 'other'

/** The parts of a KeyboardEvent that count. */
export interface KeyLike {
  readonly key: string
  readonly code: string
  readonly ctrlKey: boolean
  readonly altKey: boolean
  readonly shiftKey: boolean
  readonly metaKey: boolean
  readonly isComposing?: boolean
  readonly keyCode?: number
  readonly getModifierState?: (name: string) => boolean
}

/** A person's own keys by command id; commands not named keep theirs. */
export type Bindings = Readonly<Record<string, readonly string[]>>

export const keysOf = (command: Command, bindings: Bindings = {}): readonly string[] => bindings[command.id] ?? command.keys

const isLetter = (key: string): boolean => /^\p{L}$/u.test(key)

/** A binding as one platform delivers it: "ctrl+shift+z". */
export function chordOf(binding: string, platform: Platform): string {
  const { held, key } = readBinding(binding)
  const mac = platform === 'mac'
  const modifiers = { Mod: mac ? 'meta' : 'ctrl', Jump: mac ? 'alt' : 'ctrl', Shift: 'shift' }
  return chord(key === 'Space' ? ' ' : key, new Set(held.map(modifier => modifiers[modifier])))
}

function chord(key: string, held: ReadonlySet<string>): string {
  const shift = held.has('shift') && (key.length > 1 || key === ' ' || isLetter(key))
  const modifiers = [held.has('ctrl') && 'ctrl', held.has('alt') && 'alt', held.has('meta') && 'meta', shift && 'shift']
  return [...modifiers.filter(Boolean), isLetter(key) ? key.toLowerCase() : key].join('+')
}

/**
 * What a key press asks for, in the form of `chordOf`; null where it is not ours: while a character is being composed, dead keys,
 * modifiers alone. The digit row (unshifted) and the number pad count by position, everything else by the character typed, by
 * position where that is a letter of a script other than Latin. AltGraph only makes characters and is never Ctrl.
 */
export function chordOfEvent(event: KeyLike, platform: Platform = 'other'): string | null {
  if (event.isComposing || event.keyCode === 229 || event.key === 'Dead' || event.key === 'Process') return null
  if (/^(Shift|Control|Alt|AltGraph|Meta|CapsLock)$/.test(event.key)) return null
  const character = event.key.length === 1
  // On macOS Option makes characters as AltGraph does elsewhere; only those that no Latin letter could be meant by are taken so.
  const option = platform === 'mac' && event.altKey && character && /^[^\p{L}\p{N}\s]$/u.test(event.key)
  const composes = event.getModifierState?.('AltGraph') || option
  const held = new Set([
    ...(event.ctrlKey && !composes ? ['ctrl'] : []),
    ...(event.altKey && !composes ? ['alt'] : []),
    ...(event.metaKey ? ['meta'] : []),
    ...(event.shiftKey ? ['shift'] : []),
  ])
  return chord(keyMeant(event, Boolean(composes)), held)
}

function keyMeant(event: KeyLike, composes: boolean): string {
  const digit = /^(Digit|Numpad)(\d)$/.exec(event.code)
  const pad = digit?.[1] === 'Numpad'
  // With Num Lock off the pad moves: its keys are then named, not characters.
  if (digit && event.key.length === 1 && (pad || (!event.shiftKey && !composes))) return digit[2]!
  if (event.code === 'NumpadDecimal' && event.key.length === 1) return '.'
  if (isLetter(event.key) && !/\p{Script=Latin}/u.test(event.key)) return positionCharacter(event.code, event.shiftKey) ?? event.key
  return event.key
}

export const contextsOverlap = (a: CommandContext, b: CommandContext): boolean => a === b || a === 'desk' || b === 'desk'

type Index = ReadonlyMap<string, readonly Command[]>
const indexes = new WeakMap<Bindings, Partial<Record<Platform, Index>>>()
const OWN: Bindings = {}

function indexOf(bindings: Bindings, platform: Platform): Index {
  const known = indexes.get(bindings) ?? {}
  indexes.set(bindings, known)
  return known[platform] ??= buildIndex(bindings, platform)
}

function buildIndex(bindings: Bindings, platform: Platform): Index {
  const index = new Map<string, Command[]>()
  for (const command of commands) {
    for (const key of new Set(keysOf(command, bindings).map(each => chordOf(each, platform)))) {
      index.set(key, [...index.get(key) ?? [], command])
    }
  }
  return index
}

/** The command a key press means in a context, or null. In the score's context the desk's commands act too.
 * @param bindings the same object as long as they are the same, since an index is kept by it */
export function commandForKey(event: KeyLike, context: CommandContext, bindings: Bindings = OWN, platform: Platform = 'other'): Command | null {
  const pressed = chordOfEvent(event, platform)
  const found = pressed === null ? [] : indexOf(bindings, platform).get(pressed) ?? []
  return found.find(command => command.context === context) ?? (context === 'score' ? found.find(command => command.context === 'desk') : undefined) ?? null
}

export interface KeyConflict { readonly key: string, readonly platform: Platform, readonly commands: readonly Command[] }

/** Keys that would mean two commands at once. */
export function conflictsOf(bindings: Bindings = OWN): readonly KeyConflict[] {
  return (['other', 'mac'] as const).flatMap(platform => [...indexOf(bindings, platform)].flatMap(([key, found]) => {
    const clashing = found.filter(one => found.some(other => other !== one && contextsOverlap(one.context, other.context)))
    return clashing.length ? [{ key, platform, commands: clashing }] : []
  }))
}

/** Whether a browser keeps this combination for itself: Ctrl or Cmd with N, T, W, Q, 1–9, Tab, with or without Shift. */
export const isReserved = (binding: string): boolean =>
  (['other', 'mac'] as const).some(platform => /^(ctrl|meta)\+(shift\+)?([ntwq1-9]|Tab)$/.test(chordOf(binding, platform)))
