import { watch } from 'vue'
import { useSettings } from '~/stores/settings'

/** Settings live in a cookie, not in local storage: the server must know the palette before it draws the first page. */
export default defineNuxtPlugin(() => {
  const settings = useSettings()
  const cookie = useCookie<unknown>('copperwound-settings', { maxAge: 60 * 60 * 24 * 365, sameSite: 'lax', path: '/' })
  settings.restore(cookie.value)
  if (import.meta.client) watch(() => settings.kept, kept => (cookie.value = kept))
})
