import { expect, it } from 'vitest'
import { isCookieSecure, readConfig } from '../../server/utils/config'

const of = (env: Record<string, string>) => {
  const config = readConfig(env)
  return { mode: config.mode, demo: config.demo, secure: isCookieSecure(config, env), appUrl: config.appUrl }
}

it('a server that nobody said anything to is one for others: no demo, no open mailbox, cookies over https only', () => {
  expect(of({ PORT: '8080' })).toEqual({ mode: 'production', demo: false, secure: true, appUrl: 'http://localhost:8080' })
})

it('one’s own server has the demo, and cookies that go over plain http', () => {
  expect(of({ COPPERWOUND_MODE: 'local' })).toEqual({ mode: 'local', demo: true, secure: false, appUrl: 'http://localhost:3000' })
  expect(readConfig({}, true).mode, 'the development server').toBe('local')
})

it('the public address decides about cookies, and can be overruled', () => {
  expect(of({ APP_URL: 'https://copperwound.example/' })).toEqual({ mode: 'production', demo: false, secure: true, appUrl: 'https://copperwound.example' })
  expect(of({ APP_URL: 'http://studio.lan' }).secure).toBe(false)
  expect(of({ APP_URL: 'https://copperwound.example', NUXT_SESSION_COOKIE_SECURE: 'false' }).secure).toBe(false)
})

it('the demo can be switched on and off', () => {
  expect([of({ DEMO: 'on' }).demo, of({ COPPERWOUND_MODE: 'local', DEMO: 'off' }).demo]).toEqual([true, false])
})
