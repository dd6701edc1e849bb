import { onMounted, ref, type Ref } from 'vue'
import type { Platform } from '#shared/commands/keys'

/** Whose key names to show. The server can't know; the page settles it once it is mounted. */
export function usePlatform(): Ref<Platform> {
  const platform = ref<Platform>('other')
  onMounted(() => {
    if (/mac|iphone|ipad/i.test(navigator.platform)) platform.value = 'mac'
  })
  return platform
}
