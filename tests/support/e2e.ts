import { expect, type APIRequestContext, type Page } from '@playwright/test'
import type { Score } from '../../shared/score/types'

/** Signs one of the demo's people in, as the browser of this page. */
export async function signInDemo(page: Page, name: 'maren.holt' | 'ines.okafor' | 'teo.lindqvist' = 'maren.holt'): Promise<void> {
  const answer = await page.request.post('/api/auth/sign-in', { data: { email: `${name}@example.com`, password: 'saltmarsh-road' } })
  expect(answer.ok(), await answer.text()).toBe(true)
}

/** Puts a score into the folio of whoever is signed in; answers its id. */
export async function keepScore(request: APIRequestContext, score: Score): Promise<string> {
  const answer = await request.post('/api/arrangements', { data: { score } })
  expect(answer.ok(), await answer.text()).toBe(true)
  return (await answer.json() as { id: string }).id
}

/** Opens an arrangement on the desk and waits until its first system stands. */
export async function openDesk(page: Page, id: string): Promise<void> {
  await page.goto(`/arrangements/${id}`)
  await expect(page.getByTestId('score').locator('svg').first()).toBeVisible()
}

/** Opens a page and waits until it listens: what is pressed before that is lost, as it would be for a very quick person. */
export async function visit(page: Page, path: string): Promise<void> {
  await page.goto(path)
  await page.waitForFunction(() => (window as { useNuxtApp?: () => { isHydrating?: boolean } }).useNuxtApp?.().isHydrating === false)
}
