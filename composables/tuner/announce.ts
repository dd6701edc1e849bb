import { useIntervalFn } from '@vueuse/core'
import { readonly, ref } from 'vue'

/** Milliseconds between two things said, so that a reader of the screen can finish, and the string be heard. */
const PAUSE = 3000

/** What a screen reader says politely: the newest once in a while, never twice the same, and what is important at once.
 * @param current what there is to say now; empty: nothing */
export function useAnnouncements(current: () => string) {
  const said = ref('')
  const { pause, resume } = useIntervalFn(() => {
    const text = current()
    if (text && text !== said.value) said.value = text
  }, PAUSE)
  return {
    said: readonly(said),
    /** Says it now, and gives it time. */
    say(text: string) {
      said.value = text
      pause()
      resume()
    },
  }
}
