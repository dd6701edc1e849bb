import { randomBytes } from 'node:crypto'
import { setResponseHeader, setResponseHeaders, type H3Event } from 'h3'
import { config, isCookieSecure } from '../utils/config'

/**
 * Scripts and style sheets run when they are ours or carry this answer's nonce, never because they stand in the page.
 * Style attributes are let through: Vue and VexFlow set them. The development server needs more.
 */
function contentPolicy(nonce: string, secure: boolean): string {
  const style = import.meta.dev ? `'self' 'unsafe-inline'` : `'self' 'nonce-${nonce}'`
  return [
    `default-src 'self'`, `script-src 'self' 'nonce-${nonce}'`, `style-src ${style}`, `style-src-attr 'unsafe-inline'`,
    `img-src 'self' data: blob:`, `media-src 'self' blob:`, `font-src 'self'`, `connect-src 'self'${import.meta.dev ? ' ws: wss:' : ''}`,
    `worker-src 'self' blob:`, `object-src 'none'`, `base-uri 'none'`, `form-action 'self'`, `frame-ancestors 'none'`,
    ...(secure ? ['upgrade-insecure-requests'] : []),
  ].join('; ')
}

const FIXED = {
  'X-Content-Type-Options': 'nosniff',
  'X-Frame-Options': 'DENY',
  // Addresses with a link's token go nowhere else. Not "no-referrer": that would hide our own origin from ourselves.
  'Referrer-Policy': 'same-origin',
  'Cross-Origin-Opener-Policy': 'same-origin',
  'Cross-Origin-Resource-Policy': 'same-origin',
  // The tuner listens; nobody else may.
  'Permissions-Policy': 'camera=(), geolocation=(), microphone=(self), payment=()',
}

const nonceOf = (event: H3Event): string => ((event.context as { nonce?: string }).nonce ??= randomBytes(16).toString('base64'))

const withNonce = (parts: string[], nonce: string): string[] =>
  parts.map(part => part.replace(/<(script|style|link)(?=[\s>])/g, `<$1 nonce="${nonce}"`))

export default defineNitroPlugin((nitro) => {
  const secure = config().appUrl.startsWith('https:')
  // Where Nuxt and the session module look for it.
  process.env.NUXT_SESSION_COOKIE_SECURE = String(isCookieSecure(config(), process.env))
  if (!import.meta.dev && (process.env.NUXT_SESSION_PASSWORD ?? '').length < 32) {
    console.error('NUXT_SESSION_PASSWORD is missing or shorter than 32 characters. Set it, or start with `npm start`, which makes one and keeps it.')
    process.exit(1)
  }
  nitro.hooks.hook('request', (event) => {
    setResponseHeaders(event, FIXED)
    setResponseHeader(event, 'Content-Security-Policy', contentPolicy(nonceOf(event), secure))
    if (secure) setResponseHeader(event, 'Strict-Transport-Security', 'max-age=31536000')
  })
  nitro.hooks.hook('render:response', (response) => {
    if (response.headers) Reflect.deleteProperty(response.headers, 'x-powered-by')
  })
  nitro.hooks.hook('render:html', (html, { event }) => {
    const nonce = nonceOf(event)
    html.head = withNonce(html.head, nonce)
    html.bodyPrepend = withNonce(html.bodyPrepend, nonce)
    html.bodyAppend = withNonce(html.bodyAppend, nonce)
    // Pages say who is signed in: no store between us and the browser may keep them.
    setResponseHeader(event, 'Cache-Control', 'private, no-cache')
  })
})
