import { gzipSync } from 'node:zlib'
import { test, type Page } from '@playwright/test'
import { denseScore } from '../support/dense'
import { keepScore, openDesk, signInDemo } from '../support/e2e'

/** Script bytes, each file gzipped, that a page fetches from an empty cache until the network is quiet. */
async function scripts(page: Page, visit: () => Promise<unknown>): Promise<{ gzip: number, files: number }> {
  const sizes: number[] = []
  const pending: Promise<unknown>[] = []
  page.on('response', (response) => {
    if (response.request().resourceType() === 'script' && response.ok()) pending.push(response.body().then(body => sizes.push(gzipSync(body).length)))
  })
  await visit()
  await page.waitForLoadState('networkidle')
  await Promise.all(pending)
  return { gzip: sizes.reduce((total, size) => total + size, 0), files: sizes.length }
}

test('script sent for each page', async ({ browser }) => {
  const rows: string[] = []
  const measure = async (name: string, visit: (page: Page) => Promise<unknown>) => {
    const context = await browser.newContext()
    const page = await context.newPage()
    if (name !== 'landing') await signInDemo(page)
    const { gzip, files } = await scripts(page, () => visit(page))
    rows.push(`${name.padEnd(10)} ${(gzip / 1000).toFixed(0).padStart(5)} kB gzip in ${files} files`)
    await context.close()
  }
  await measure('landing', page => page.goto('/'))
  await measure('tuning', page => page.goto('/tunings/c2-g2-d3-g3-c4-d4'))
  await measure('folio', page => page.goto('/folio'))
  await measure('desk', async page => openDesk(page, await keepScore(page.request, denseScore(16))))
  console.log(`\n${rows.join('\n')}`)
})
