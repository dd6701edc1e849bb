import type { Clock } from './clock'
import type { Saver } from './saver'

/** Within this time (ms) what waits for a quiet moment is done, also in a tab behind others, which draws no frame. */
const LATEST = 200
const whenIdle = (call: () => void) => (typeof requestIdleCallback === 'function' ? void requestIdleCallback(call, { timeout: LATEST }) : void setTimeout(call))

/** The browser's clock. */
export const browserClock: Clock = {
  now: () => Date.now(),
  after(ms, call) {
    const timer = setTimeout(call, ms)
    return () => clearTimeout(timer)
  },
  random: () => Math.random(),
  afterPaint(call) {
    let done = false
    const once = () => {
      if (!done) call()
      done = true
    }
    requestAnimationFrame(() => whenIdle(once))
    setTimeout(once, LATEST)
  },
}

/** Tells a saver what the browser knows: the network, the page going and coming back, other tabs' saves. Returns what ends it. */
export function connectBrowser(arrangement: string, saver: Saver): { readonly announce: (revision: number) => void, readonly end: () => void } {
  const ends = new AbortController()
  const on = (target: EventTarget, name: string, call: () => void) => target.addEventListener(name, call, { signal: ends.signal })
  on(window, 'online', () => saver.network(true))
  on(window, 'offline', () => saver.network(false))
  on(window, 'pagehide', () => void saver.leave())
  on(window, 'pageshow', () => void saver.now())
  on(document, 'visibilitychange', () => void (document.visibilityState === 'hidden' ? saver.now() : saver.catchUp()))
  const channel = typeof BroadcastChannel === 'undefined' ? null : new BroadcastChannel(`copperwound-saved-${arrangement}`)
  if (channel) on(channel, 'message', () => void saver.catchUp())
  return {
    announce: revision => channel?.postMessage(revision),
    end() {
      ends.abort()
      channel?.close()
    },
  }
}
