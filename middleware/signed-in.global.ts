import { isOpenPage } from '~/composables/places'

/** Signed-out people are asked to sign in, and come back to where they were going. Unknown addresses stay "not found". */
export default defineNuxtRouteMiddleware((to) => {
  if (to.matched.length === 0 || isOpenPage(to.path)) return
  const { loggedIn } = useUserSession()
  if (!loggedIn.value) return navigateTo({ path: '/sign-in', query: { to: to.fullPath } })
})
