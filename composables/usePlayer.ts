import { createSharedComposable, useEventListener, useLocalStorage } from '@vueuse/core'
import { storeToRefs } from 'pinia'
import { computed, onScopeDispose, readonly, ref, shallowRef, watch } from 'vue'
import { useSettings } from '~/stores/settings'
import type { Cursor, Selection } from '#shared/editor/state'
import type { Note, Score, VoiceName } from '#shared/score/types'
import { clampRate, momentAt, scheduleOf, soundOf, type Moment, type Range, type Schedule } from '#shared/sound'
import type { LiveSound } from './sound/live'
import type { FromStrings } from './sound/messages'

/** silent: nothing has asked for sound yet. held: the browser waits for a click or key. missing: this browser can't. failed: its parts did not arrive. */
export type SoundState = 'silent' | 'opening' | 'ready' | 'held' | 'missing' | 'failed'

/** To stand beside every volume control. */
export const VOLUME_CAUTION = 'Start low, above all with headphones: loud playback harms hearing.'

const MESSAGES: Readonly<Partial<Record<SoundState, string>>> = {
  held: 'The browser is holding sound back. Click the page once, then play again.',
  missing: 'This browser can’t play sound here. It needs Web Audio and a secure (https) address.',
  failed: 'Sound could not be loaded. Check the connection, then press the key again.',
}

const DEFAULT_VOLUME = 0.7
/** A note heard while entering is a hint: it dies sooner than in the piece. */
const HINT_SECONDS = 2.5
/** A note that could not be heard within this time of its key is left out; late it would only confuse. */
const LATE_MILLISECONDS = 700

export interface PlayOptions { readonly rate?: number, readonly click?: boolean }

/** The part of the score that a cursor (from there on) or a selection (that and no more) asks for. */
function rangeOf(where: Cursor | Selection | null): Range {
  if (!where) return {}
  if (!('cursor' in where)) return { from: where }
  return where.anchor ? { from: where.anchor, through: where.cursor } : { from: where.cursor }
}

function createPlayer() {
  const settings = useSettings()
  const { soundNotes: enabled, click } = storeToRefs(settings)
  const volume = useLocalStorage('copperwound-volume', DEFAULT_VOLUME, { initOnMounted: true })
  const rate = ref(1)
  const state = ref<SoundState>('silent')
  const schedule = shallowRef<Schedule | null>(null)
  const position = shallowRef<Moment | null>(null)
  const playing = computed(() => schedule.value !== null)
  const message = computed(() => MESSAGES[state.value] ?? null)

  let opening: Promise<LiveSound | null> | null = null
  let live: LiveSound | null = null

  function hear({ position: seconds }: FromStrings): void {
    const what = schedule.value
    if (!what) return
    if (seconds === null || seconds >= what.length) finish()
    else position.value = momentAt(what, seconds)
  }

  function finish(): void {
    schedule.value = null
    position.value = null
  }

  async function open(): Promise<LiveSound | null> {
    try {
      const { openSound } = await import('./sound/live')
      live = await openSound(volume.value, hear)
      return live
    }
    catch (error) {
      state.value = error instanceof Error && error.name === 'NoSound' ? 'missing' : 'failed'
      opening = null
      return null
    }
  }

  /** The strings, ready to sound; null where they can't. To be called while a key or click is handled. */
  async function ready(): Promise<LiveSound | null> {
    if (state.value === 'silent') state.value = 'opening'
    const sound = await (opening ??= open())
    if (!sound) return null
    state.value = await sound.wake() ? 'ready' : 'held'
    return state.value === 'ready' ? sound : null
  }

  function soundAll(score: Score, notes: readonly Note[], voice: VoiceName = 'upper'): void {
    if (!enabled.value || playing.value || !notes.length) return
    const hints = notes.map(note => soundOf(score.head, note, voice)).map(note => ({ ...note, seconds: Math.min(note.seconds, HINT_SECONDS) }))
    // Once open, in the same turn as the key: nothing may come between.
    if (live?.isAwake()) return live.send({ kind: 'sound', notes: hints })
    const asked = performance.now()
    void ready().then((sound) => {
      if (performance.now() - asked < LATE_MILLISECONDS) sound?.send({ kind: 'sound', notes: hints })
    })
  }

  /** Plays from a cursor to the end, repeats included; or a selection, once. */
  async function play(score: Score, where: Cursor | Selection | null, options: PlayOptions = {}): Promise<void> {
    rate.value = clampRate(options.rate ?? rate.value)
    if (options.click !== undefined) click.value = options.click
    await start(scheduleOf(score, rangeOf(where)), () => ({ rate: rate.value, click: click.value }))
  }

  async function start(what: Schedule, how: () => { rate: number, click: boolean }): Promise<void> {
    schedule.value = what
    const sound = await ready()
    if (schedule.value !== what) return
    if (sound) sound.send({ kind: 'play', schedule: what, ...how() })
    else finish()
  }

  function stop(): void {
    finish()
    live?.send({ kind: 'stop' })
  }

  watch(rate, value => live?.send({ kind: 'rate', rate: clampRate(value) }))
  watch(click, value => live?.send({ kind: 'click', click: value }))
  watch(volume, value => live?.setVolume(value))
  if (import.meta.client) useEventListener(window, 'pagehide', stop)
  onScopeDispose(() => {
    stop()
    live?.close()
    live = opening = null
  })

  return {
    /** Sounds one note, if notes are to be heard while entering. */
    soundNote: (score: Score, note: Note, voice?: VoiceName) => soundAll(score, [note], voice),
    /** Sounds an event's notes together. */
    soundNotes: soundAll,
    play,
    /** Plays tones that belong to no score, at their own pace. */
    playTones: (tones: Schedule) => start(tones, () => ({ rate: 1, click: false })),
    stop,
    /** Loads what sound needs before it is asked for, so that the first note comes at once. Makes no sound and opens no device. */
    prepare: () => { void import('./sound/live') },
    playing,
    /** The bar and events under way; null while nothing plays. */
    position: readonly(position),
    /** 0.25 to 1.5; takes effect while playing. */
    rate,
    click,
    /** 0 to 1. Show `VOLUME_CAUTION` beside its control. */
    volume,
    /** Entering or moving onto a note sounds it. */
    enabled,
    state: readonly(state),
    /** Why nothing is heard, and what helps; null where all is well. */
    message,
  }
}

/** One player for all who use it; the device is let go when the last of them has left the page. */
export const usePlayer = createSharedComposable(createPlayer)
