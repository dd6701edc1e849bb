import { describe, expect, it } from 'vitest'
import { isOpenPage, returnPath } from '../../../composables/places'
import { linksIn } from '../../../composables/mailLinks'
import { problemOf } from '../../../composables/problem'

describe('the way back after signing in', () => {
  it.each(['/folio', '/arrangements/a1?bar=3#b7', '/account'])('is %s', path => expect(returnPath(path)).toBe(path))

  // Ways to name another site, from OWASP, "Unvalidated Redirects and Forwards Cheat Sheet" and the URL Standard's own parser quirks.
  const foreign = ['//evil.example', '/\\evil.example', '\\\\evil.example', 'https://evil.example', 'javascript:alert(1)', '/\t/evil.example',
    '/\n/evil.example', '/..//evil.example', '/.//evil.example', '/a/..//evil.example', '///evil.example', 'evil.example', '', undefined, null, ['/folio'], '/%2e//evil.example']
  it.each(foreign.map(path => [path]))('is never another site: %j', (path) => {
    const ours = 'https://copperwound.example'
    expect(new URL(returnPath(path), ours).origin).toBe(ours)
    expect(returnPath(path)).not.toMatch(/^\/[/\\]/)
  })
  it('does not lead back to signing in', () => expect(returnPath('/sign-in?to=/folio')).toBe('/folio'))
})

describe('pages', () => {
  it.each(['/', '/sign-in', '/help', '/help/', '/confirm'])('%s is open', path => expect(isOpenPage(path)).toBe(true))
  it.each(['/folio', '/account', '/arrangements/a1', '/helpers', '/sign-in/x'])('%s asks for signing in', path => expect(isOpenPage(path)).toBe(false))
})

describe('a request that failed', () => {
  it('tells what our server said', () => {
    const data = { statusCode: 401, message: 'outer', data: { code: 'wrong-credentials', message: 'Wrong.', help: 'Try again.', field: 'password' } }
    expect(problemOf(Object.assign(new Error('x'), { statusCode: 401, data }))).toEqual({ code: 'wrong-credentials', message: 'Wrong.', help: 'Try again.', field: 'password' })
  })
  it.each([[new TypeError('Failed to fetch'), 'offline'], [{ statusCode: 502, data: '<html>' }, 'http-502'], [{ statusCode: 429 }, 'too-many'], ['odd', 'offline'], [null, 'offline']])(
    'of another kind has words as well: %j', (error, code) => {
      const problem = problemOf(error)
      expect(problem.code).toBe(code)
      expect(problem.help).toBeTruthy()
    })
})

describe('links in a message', () => {
  it('are found in order, once, without the sentence around them', () => {
    expect(linksIn('Open https://a.example/confirm#token=x_1-2. Or (http://b.example/y), https://a.example/confirm#token=x_1-2 again.'))
      .toEqual(['https://a.example/confirm#token=x_1-2', 'http://b.example/y'])
  })
  it('are never scripts', () => expect(linksIn('javascript:alert(1) data:text/html,x ftp://x.example')).toEqual([]))
})
