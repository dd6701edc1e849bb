import { useEventListener, useIntervalFn, useLocalStorage, useWakeLock } from '@vueuse/core'
import { computed, onScopeDispose, readonly, ref, shallowRef, toValue, watch, type MaybeRefOrGetter } from 'vue'
import { frequencyOf } from '#shared/score/pitch'
import { A4, approachOf, awaitPluck, detectPitch, follow, FROM_ABOVE, judge, levelOf, NOTHING_HEARD, readA4, windowFor, type Aim, type Approach, type Followed, type Quiet, type Verdict } from '#shared/sound/tuner'
import { NoMicrophone, openMicrophone, type Microphone, type MicrophoneProblem } from './tuner/microphone'
import { useTone } from './tuner/useTone'

/** off: not asked for yet, or switched off. lost: taken away. hidden: switched off because the page went out of sight. */
export type TunerState = 'off' | 'asking' | 'listening' | 'lost' | 'hidden' | MicrophoneProblem

const MESSAGES: Readonly<Partial<Record<TunerState, { readonly title: string, readonly text: string }>>> = {
  'refused': { title: 'The browser may not use the microphone', text: 'Allow it in the site’s settings (the sign beside the address), then press Listen again. Or tune by the reference tone.' },
  'absent': { title: 'No microphone was found', text: 'Connect one, then press Listen again. Or tune by the reference tone.' },
  'in-use': { title: 'The microphone is in use', text: 'Another program holds it. Close that one, then press Listen again. Or tune by the reference tone.' },
  'unsupported': { title: 'This browser can’t listen here', text: 'It needs Web Audio and a secure (https) address. Tune by the reference tone, or by the strings as described.' },
  'failed': { title: 'The microphone did not open', text: 'Press Listen again. If that does not help, tune by the reference tone.' },
  'lost': { title: 'The microphone went away', text: 'It was unplugged or stopped from the browser. Press Listen to go on.' },
  'hidden': { title: 'Listening has stopped', text: 'The page was out of sight. Press Listen to go on.' },
}

/** Milliseconds between two looks. */
const EVERY = 50
/** Seconds after its last sound for which a string counts as heard. */
const FRESH = 0.5

const now = (): number => performance.now() / 1000

/** Listens to one string, and sounds its pitch for those who tune by ear. Opens nothing before it is told to; lets go of the
 * microphone when the page is left or out of sight. */
export function useTuner(aim: MaybeRefOrGetter<Omit<Aim, 'a4'>>) {
  const keptA4 = useLocalStorage<number>('copperwound-a4', A4.usual, { initOnMounted: true })
  const a4 = computed({ get: () => readA4(keptA4.value), set: value => void (keptA4.value = readA4(value)) })
  const state = ref<TunerState>('off')
  const followed = shallowRef<Followed>(NOTHING_HEARD)
  const time = ref(0)
  const approach = ref<Approach>(null)
  const screen = useWakeLock()
  const target = computed(() => frequencyOf(toValue(aim).target, a4.value))
  const tone = useTone(target, () => frequencyOf(toValue(aim).from ?? toValue(aim).target, a4.value))

  let microphone: Microphone | null = null
  let asked = 0
  /** After a change of string: the one before may ring on, at the very same pitch. */
  let quiet: Quiet | null = { floor: 0, isPlucked: true }
  let samples = new Float32Array(0)

  const looking = useIntervalFn(look, EVERY, { immediate: false })

  function look(): void {
    time.value = now()
    if (!microphone) return
    // What the loudspeaker plays is in tune, whatever the string does: it must not be taken for it.
    if (tone.isInTheRoom()) return
    const { from, target: to } = toValue(aim)
    const size = windowFor(frequencyOf(Math.min(from ?? to, to) - 5, a4.value), microphone.rate)
    if (samples.length !== size) samples = new Float32Array(size)
    microphone.read(samples)
    quiet = awaitPluck(quiet, levelOf(samples))
    if (!quiet.isPlucked) return
    followed.value = follow(followed.value, detectPitch(samples, microphone.rate, target.value), time.value)
    const { pitch } = followed.value
    if (pitch?.isSteady && pitch.time === time.value) approach.value = approachOf(approach.value, judged(pitch.hertz))
  }

  const judged = (hertz: number): Verdict => judge(hertz, { ...toValue(aim), a4: a4.value })

  const verdict = computed((): Verdict | null => {
    const { pitch } = followed.value
    const found = pitch && judged(pitch.hertz)
    return found?.kind === 'in-tune' && approach.value === 'above' ? { ...found, advice: FROM_ABOVE } : found
  })

  function close(to: TunerState): void {
    asked += 1
    looking.pause()
    microphone?.close()
    void screen.release()
    microphone = null
    followed.value = NOTHING_HEARD
    state.value = to
  }

  async function listen(): Promise<void> {
    if (state.value === 'asking' || microphone) return
    state.value = 'asking'
    const question = ++asked
    try {
      const opened = await openMicrophone(() => close('lost'))
      // Left, or switched off, while the browser was asking.
      if (question !== asked) return opened.close()
      microphone = opened
      state.value = 'listening'
      looking.resume()
      // A screen that goes dark would end the listening. Some devices refuse: then it is as before.
      void screen.request('screen').catch(() => undefined)
    }
    catch (error) {
      if (question === asked) state.value = error instanceof NoMicrophone ? error.problem : 'failed'
    }
  }

  function leave(to: TunerState): void {
    if (microphone || state.value === 'asking') close(to)
    tone.stop()
  }

  watch(() => [toValue(aim).string, toValue(aim).target].join(), () => {
    followed.value = NOTHING_HEARD
    approach.value = null
    quiet = null
  })
  watch(tone.sounding, () => {
    followed.value = NOTHING_HEARD
  })
  if (import.meta.client) {
    useEventListener(window, 'pagehide', () => leave('off'))
    useEventListener(document, 'visibilitychange', () => void (document.hidden && state.value === 'listening' && leave('hidden')))
  }
  onScopeDispose(() => leave('off'))

  return {
    state: readonly(state),
    message: computed(() => MESSAGES[state.value] ?? null),
    listen,
    stop: () => leave('off'),
    /** Of what is heard, or was a moment ago; null: nothing yet. */
    verdict,
    /** Whether the string came down onto its pitch, from which it may slip. */
    isFromAbove: computed(() => approach.value === 'above'),
    isSteady: computed(() => followed.value.pitch?.isSteady ?? false),
    /** Whether it sounds now. */
    isFresh: computed(() => followed.value.pitch !== null && time.value - followed.value.pitch.time < FRESH),
    /** Hertz that the string should have. */
    target,
    /** Hertz, `A4.lowest` to `A4.highest`. */
    a4,
    tone,
  }
}
