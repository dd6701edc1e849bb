/** Pages that anyone may see; all others ask for signing in. */
const OPEN: readonly string[] = ['/', '/sign-in', '/register', '/confirm', '/forgot', '/reset', '/help', '/outbox']

/** Every tuning has a page, open as well. */
const OPEN_UNDER = '/tunings/'

export const isOpenPage = (path: string): boolean =>
  `${path}/`.startsWith(OPEN_UNDER) || OPEN.includes(path.length > 1 ? path.replace(/\/+$/, '') : path)

/**
 * Where to go after signing in: a path of ours, or the folio. Anything that a browser could read as another site
 * (`//host`, `/\host`, a scheme, control characters, which URL parsing drops) is refused.
 * URL Standard, https://url.spec.whatwg.org/#concept-basic-url-parser
 */
export function returnPath(asked: unknown): string {
  const home = '/folio'
  if (typeof asked !== 'string' || !asked.startsWith('/') || /[\\\p{Cc}]/u.test(asked)) return home
  const base = 'http://local.invalid'
  if (!URL.canParse(asked, base)) return home
  const url = new URL(asked, base)
  if (url.origin !== base || url.pathname === '/sign-in') return home
  // Dots in the path can resolve to a leading "//" again.
  return url.pathname.startsWith('//') ? home : `${url.pathname}${url.search}${url.hash}`
}
