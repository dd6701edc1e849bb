import { useLocalStorage } from '@vueuse/core'
import { onScopeDispose, readonly, ref, toValue, watch, type MaybeRefOrGetter } from 'vue'
import { startTone, type Tone } from './tone'

/** Of the old pitch and of the new one, when a change is heard, milliseconds. */
const WAS = 1300
const BECOMES = 1900
/** A tone goes on in the room for a moment after its end, milliseconds. */
const FADES = 500

/** A reference tone for those who tune by ear.
 * @param hertz the pitch of the string
 * @param before what it had before; the same where it does not change */
export function useTone(hertz: MaybeRefOrGetter<number>, before: MaybeRefOrGetter<number>) {
  const volume = useLocalStorage('copperwound-tone-volume', 0.5, { initOnMounted: true })
  const sounding = ref<'target' | 'change' | null>(null)
  let tone: Tone | null = null
  let steps: ReturnType<typeof setTimeout>[] = []
  let fadedAt = 0

  function stop(): void {
    steps.forEach(clearTimeout)
    steps = []
    if (!tone) return
    tone.stop()
    tone = null
    sounding.value = null
    fadedAt = performance.now() + FADES
  }

  function start(what: 'target' | 'change', at: number): void {
    stop()
    tone = startTone(at, volume.value)
    sounding.value = tone && what
  }

  function toggle(): void {
    if (tone) stop()
    else start('target', toValue(hertz))
  }

  /** The pitch as it was, then as it becomes. */
  function hearChange(): void {
    start('change', toValue(before))
    steps = [setTimeout(() => tone?.setHertz(toValue(hertz)), WAS), setTimeout(stop, WAS + BECOMES)]
  }

  watch(() => toValue(hertz), (value) => {
    if (sounding.value === 'change') stop()
    else tone?.setHertz(value)
  })
  watch(volume, value => tone?.setVolume(value))
  onScopeDispose(stop)
  return {
    /** The tone that sounds: the string's pitch, or its old one and then the new. */
    sounding: readonly(sounding),
    /** 0 to 1. */
    volume,
    toggle,
    hearChange,
    stop,
    /** Whether a microphone in the room may hear it. */
    isInTheRoom: () => tone !== null || performance.now() < fadedAt,
  }
}
