import { expect, test, type Page } from '@playwright/test'
import { visit } from '../support/e2e'

const password = 'three plain words'
const newPassword = 'four rather plain words'
let count = 0
const newcomer = () => ({ name: 'Runa Vest', email: `runa.${Date.now()}.${count++}@example.org` })

async function fillIn(page: Page, fields: Record<string, string>): Promise<void> {
  for (const [label, value] of Object.entries(fields)) await page.getByLabel(label, { exact: true }).fill(value)
}

/** Reads the newest message to this address in the local mailbox and follows its link. */
async function followMail(page: Page, email: string, subject: RegExp): Promise<void> {
  const link = page.getByRole('article').getByRole('link', { name: /#token=/ })
  // Mail is written after the answer was given.
  await expect(async () => {
    await visit(page, '/outbox')
    await page.getByRole('button', { name: new RegExp(`${subject.source}.*${email}`, 'i') }).first().click({ timeout: 1000 })
    await expect(page.getByRole('article').getByRole('heading', { name: subject })).toBeFocused()
  }).toPass({ timeout: 15_000 })
  const { pathname, hash } = new URL((await link.getAttribute('href'))!)
  await visit(page, pathname + hash)
}

test('a newcomer registers, confirms, signs out and in, and gets a new password', async ({ page }) => {
  const { name, email } = newcomer()
  await visit(page, '/')
  await page.getByRole('main').getByRole('link', { name: 'Register' }).click()
  await fillIn(page, { 'Name': name, 'E-mail': email, 'Password': password })
  await page.getByRole('button', { name: 'Register' }).click()
  await expect(page.getByRole('status').filter({ hasText: email })).toBeFocused()

  await visit(page, '/sign-in')
  await fillIn(page, { 'E-mail': email, 'Password': password })
  await page.getByRole('button', { name: 'Sign in' }).click()
  await expect(page.getByRole('alert')).toBeVisible()
  await expect(page).toHaveURL(/sign-in/)

  await followMail(page, email, /confirm your address/i)
  await page.getByRole('button', { name: 'Confirm and sign in' }).click()
  await expect(page).toHaveURL(/\/folio$/)
  await expect(page.getByRole('heading', { name: 'Nothing here yet' })).toBeVisible()

  await page.getByRole('button', { name: new RegExp(name) }).click()
  await page.getByRole('menuitem', { name: 'Sign out' }).click()
  await expect(page.getByRole('banner').getByRole('link', { name: 'Sign in' })).toBeVisible()
  await page.goto('/folio')
  await expect(page).toHaveURL(/\/sign-in\?to=/)

  await visit(page, '/forgot')
  await fillIn(page, { 'E-mail': email })
  await page.getByRole('button', { name: 'Send me a link' }).click()
  await expect(page.getByRole('status').filter({ hasText: email })).toBeVisible()
  await followMail(page, email, /choose a new password/i)
  await fillIn(page, { 'New password': newPassword })
  await page.getByRole('button', { name: 'Set the password' }).click()
  await expect(page.getByText('Your new password is set')).toBeVisible()

  await fillIn(page, { 'E-mail': email, 'Password': password })
  await page.getByRole('button', { name: 'Sign in' }).click()
  await expect(page.getByRole('alert')).toBeVisible()
  await fillIn(page, { 'E-mail': email, 'Password': newPassword })
  await page.getByRole('button', { name: 'Sign in' }).click()
  await expect(page).toHaveURL(/\/folio$/)
})

test('errors stand beside their fields and the first one has the focus', async ({ page }) => {
  await visit(page, '/register')
  await fillIn(page, { 'Name': 'Runa Vest', 'E-mail': 'runa', 'Password': 'short' })
  await page.getByRole('button', { name: 'Register' }).click()
  const email = page.getByLabel('E-mail', { exact: true })
  await expect(email).toBeFocused()
  await expect(email).toHaveAccessibleDescription(/no complete e-mail address/)
  await expect(page.getByLabel('Password', { exact: true })).toHaveAccessibleDescription(/at least 10 characters; this has 5/)
})

test('signing in leads back to the page that was asked for, and nowhere else', async ({ page, baseURL }) => {
  await visit(page, '/account?from=mail')
  await expect(page).toHaveURL(/\/sign-in\?to=/)
  await fillIn(page, { 'E-mail': 'ines.okafor@example.com', 'Password': 'saltmarsh-road' })
  await page.keyboard.press('Enter')
  await expect(page).toHaveURL(`${baseURL}/account?from=mail`)
  await visit(page, '/sign-in?to=//evil.example/folio')
  await expect(page).toHaveURL(`${baseURL}/folio`)
})

test('the password can be changed, and the palette is remembered before the first paint', async ({ page }) => {
  const { name, email } = newcomer()
  const made = await page.request.post('/api/auth/register', { data: { name, email, password } })
  expect(made.status()).toBe(202)
  await followMail(page, email, /confirm your address/i)
  await page.getByRole('button', { name: 'Confirm and sign in' }).click()
  await expect(page).toHaveURL(/\/folio$/)
  await visit(page, '/account')
  await fillIn(page, { 'Password now': 'not this one', 'New password': newPassword })
  await page.getByRole('button', { name: 'Change the password' }).click()
  await expect(page.locator('form').getByText(/password/i).filter({ hasText: /not|wrong|differ/i }).first()).toBeVisible()
  await fillIn(page, { 'Password now': password })
  await page.getByRole('button', { name: 'Change the password' }).click()
  await expect(page.getByText('The password is changed.')).toBeVisible()

  await page.getByRole('radio', { name: 'Night' }).check()
  const html = await (await page.request.get('/account')).text()
  expect(html).toMatch(/<html[^>]*class="[^"]*night/)
  await page.reload()
  expect(await page.evaluate(() => getComputedStyle(document.documentElement).backgroundColor)).toBe('rgb(20, 17, 13)')
})

test('a new password chosen while signed in ends this session as well, and says where to go on', async ({ page }) => {
  const { name, email } = newcomer()
  await visit(page, '/register')
  await fillIn(page, { 'Name': name, 'E-mail': email, 'Password': password })
  await page.getByRole('button', { name: 'Register' }).click()
  await followMail(page, email, /confirm your address/i)
  await page.getByRole('button', { name: 'Confirm and sign in' }).click()
  await expect(page).toHaveURL(/\/folio$/)
  await page.request.post('/api/auth/forgot', { data: { email } })
  await followMail(page, email, /choose a new password/i)
  await fillIn(page, { 'New password': newPassword })
  await page.getByRole('button', { name: 'Set the password' }).click()
  await expect(page).toHaveURL(/\/sign-in/)
  await expect(page.getByText('Your new password is set')).toBeVisible()
})
