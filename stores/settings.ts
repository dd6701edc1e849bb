import { defineStore } from 'pinia'
import { computed, ref } from 'vue'

/** `system` follows the computer's own choice of light or dark. */
export type Palette = 'day' | 'night' | 'system'
export const PALETTES: readonly Palette[] = ['day', 'night', 'system']

/** What a person chose for this browser. Kept in a cookie (plugins/settings.ts), so that the first page is drawn with it. */
export interface Settings {
  readonly palette: Palette
  /** Entering or moving onto a note sounds it. */
  readonly soundNotes: boolean
  /** A click on every beat while playing. */
  readonly click: boolean
  /** Necks and chord diagrams are drawn the other way round. */
  readonly leftHanded: boolean
}

export const DEFAULTS: Settings = { palette: 'system', soundNotes: true, click: false, leftHanded: false }

/** Whatever was kept, made whole: unknown or damaged values fall back to the defaults one by one. */
export function readSettings(kept: unknown): Settings {
  const found = typeof kept === 'object' && kept !== null ? kept as Partial<Record<keyof Settings, unknown>> : {}
  const flag = (name: 'soundNotes' | 'click' | 'leftHanded') => typeof found[name] === 'boolean' ? found[name] : DEFAULTS[name]
  return {
    palette: PALETTES.find(palette => palette === found.palette) ?? DEFAULTS.palette,
    soundNotes: flag('soundNotes'),
    click: flag('click'),
    leftHanded: flag('leftHanded'),
  }
}

export const useSettings = defineStore('settings', () => {
  const palette = ref<Palette>(DEFAULTS.palette)
  const soundNotes = ref(DEFAULTS.soundNotes)
  const click = ref(DEFAULTS.click)
  const leftHanded = ref(DEFAULTS.leftHanded)
  const kept = computed<Settings>(() => ({ palette: palette.value, soundNotes: soundNotes.value, click: click.value, leftHanded: leftHanded.value }))
  function restore(from: unknown) {
    const settings = readSettings(from)
    palette.value = settings.palette
    soundNotes.value = settings.soundNotes
    click.value = settings.click
    leftHanded.value = settings.leftHanded
  }
  return { palette, soundNotes, click, leftHanded, kept, restore }
})
