import { defineEventHandler, getRequestHeader } from 'h3'
import { config } from '../utils/config'
import { problem } from '../utils/problems'

const SAFE = new Set(['GET', 'HEAD', 'OPTIONS'])

function hostOf(origin: string): string | null {
  try {
    return new URL(origin).host
  }
  catch {
    return null
  }
}

/**
 * Requests that change something come from our own pages only. Browsers say where a request comes from: by Sec-Fetch-Site
 * (Fetch Metadata, W3C) on secure origins, by Origin on every unsafe method. A program that says neither carries no one's cookie.
 */
export default defineEventHandler((event) => {
  if (SAFE.has(event.method)) return
  const site = getRequestHeader(event, 'sec-fetch-site')
  const origin = getRequestHeader(event, 'origin')
  const ours = [getRequestHeader(event, 'host'), hostOf(config().appUrl)]
  const fits = (site === undefined || site === 'same-origin') && (origin === undefined || ours.includes(hostOf(origin) ?? ''))
  if (!fits) throw problem(403, { code: 'foreign-origin', message: 'This request came from another site and was refused.' })
})
