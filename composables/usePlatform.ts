import type { Platform } from '#shared/commands/keys'

/** Whose keyboard this is: macOS has its own modifiers. On the server, and where the browser does not say: the other one. */
export function usePlatform(): Platform {
  return typeof navigator !== 'undefined' && /mac|iphone|ipad/i.test(navigator.platform) ? 'mac' : 'other'
}
