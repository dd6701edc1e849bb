import { onMounted, ref, watch, type Ref } from 'vue'
import { useRoute } from 'vue-router'

/**
 * The token of a mailed link. It stands behind the #, which browsers keep to themselves, so that it gets into no log and no
 * Referer. Null until the page runs in the browser, empty where the link has none.
 */
export function useLinkToken(): Ref<string | null> {
  const token = ref<string | null>(null)
  const route = useRoute()
  onMounted(() => watch(() => route.hash, hash => (token.value = /^#token=([\w-]+)$/.exec(hash)?.[1] ?? ''), { immediate: true }))
  return token
}
