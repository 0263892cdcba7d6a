import { randomUUID } from 'node:crypto'
import type { Browser, BrowserContext, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest'
import { accessibilityFindings, go, lookOver, openBrowser, visit } from './browser'

/** Looks again and again until it is so: pages ask the API, and the API asks the mail. */
const soon = { timeout: 15_000 }

let browser: Browser
beforeAll(async () => {
  browser = await openBrowser()
})
afterAll(() => browser.close())

const account = (role: string) => {
  const found = inject('demoAccounts').find((one) => one.role === role)
  if (found === undefined) throw new Error(`there is no demo account of a ${role}`)
  return found
}

async function signIn(page: Page, role: string): Promise<void> {
  const { email, password } = account(role)
  await go(page, '/sign-in')
  await page.getByLabel('Email').fill(email)
  await page.getByLabel('Password').fill(password)
  await page.getByRole('button', { name: 'Sign in' }).click()
  await page.waitForURL(/\/account/)
}

const ADMIN_PAGES: readonly { path: string; shows: RegExp }[] = [
  { path: '/account', shows: /API keys/ },
  { path: '/people', shows: /Invite/ },
  { path: '/webhooks', shows: /How to check a signature/ },
  { path: '/audit', shows: /session\.begin/ },
  { path: '/audit?action=session.begin', shows: /session\.begin/ },
  { path: '/outbox', shows: /Mail that would have been sent/ },
  { path: '/following', shows: /one mail an edition|follow nothing yet/i },
]
const OPEN_PAGES: readonly { path: string; shows: RegExp }[] = [
  { path: '/reset-password', shows: /Send me a link/ },
  { path: '/reset-password?token=made-up', shows: /New password again/ },
  { path: '/sign-in', shows: /Forgotten your password/ },
]

describe('in both themes and at every width', () => {
  let admin: BrowserContext
  beforeAll(async () => {
    const { context, page } = await visit(browser)
    await signIn(page, 'admin')
    admin = context
  })
  afterAll(() => admin.close())

  it.each(ADMIN_PAGES)('$path of an admin is accessible, quiet, does not scroll sideways, and has its content', (page) => lookOver(admin, page))

  it.each(OPEN_PAGES)('so is $path, which a link in a mail leads to', async (page) => {
    const { context } = await visit(browser)
    await lookOver(context, page)
    await context.close()
  })
})

it('a stranger is asked to sign in, and comes back to the page', async () => {
  const { context, page } = await visit(browser)
  await go(page, '/following')
  expect(page.url()).toMatch(/\/sign-in\?next=%2Ffollowing/)
  const { email, password } = account('reader')
  await page.getByLabel('Email').fill(email)
  await page.getByLabel('Password').fill(password)
  await page.getByRole('button', { name: 'Sign in' }).click()
  await page.waitForURL(/\/following/)
  expect(await page.getByRole('link', { name: 'People' }).count()).toBe(0)
  await go(page, '/people')
  await expect.poll(() => page.locator('#main').innerText(), soon).toMatch(/needs the role admin/)
  await context.close()
})

it('a person is invited, finds the mail, comes in, follows a level, and is closed', async () => {
  const email = `by.page.${randomUUID().slice(0, 8)}@test.example`
  const chosen = `Person ${randomUUID().slice(0, 8)}`
  const { context, page } = await visit(browser)
  await signIn(page, 'admin')
  await go(page, '/people')
  const form = page.getByRole('form', { name: 'Invite a person' })
  await form.getByLabel('Email').fill(email)
  await form.getByLabel('Name').fill('Invited Person')
  await form.getByLabel('Role').selectOption('curator')
  await form.getByRole('button', { name: 'Invite' }).click()
  await expect.poll(() => page.getByText('Invited Person is invited').count(), soon).toBe(1)
  await go(page, '/outbox')
  const link = page.locator('details', { hasText: email }).locator('a[href*="/invitation?token="]')
  await expect.poll(() => link.count(), soon).toBe(1)
  const address = (await link.getAttribute('href')) ?? ''

  const guest = await visit(browser)
  await go(guest.page, address)
  await expect.poll(() => guest.page.getByLabel('Email').inputValue(), soon).toBe(email)
  expect(await accessibilityFindings(guest.page)).toEqual([])
  await guest.page.getByLabel('Your name').fill(chosen)
  await guest.page.getByLabel('Password').fill('granite lantern orbit')
  await guest.page.getByRole('button', { name: 'Make my account' }).click()
  await guest.page.waitForURL(/\/account/)
  await expect.poll(() => guest.page.locator('h1').innerText(), soon).toBe(chosen)
  await go(guest.page, '/levels/Na-I.3')
  await guest.page.getByRole('button', { name: 'Follow' }).click()
  await expect.poll(() => guest.page.getByRole('button', { name: 'Following' }).getAttribute('aria-pressed'), soon).toBe('true')
  await go(guest.page, '/levels/Na-I.3')
  await expect.poll(() => guest.page.getByRole('button', { name: 'Following' }).count(), soon).toBe(1)
  expect(await accessibilityFindings(guest.page)).toEqual([])
  await go(guest.page, '/following')
  await guest.page.getByRole('button', { name: 'Stop following Na-I.3' }).click()
  await expect.poll(() => guest.page.locator('#main').innerText(), soon).toMatch(/You follow nothing yet/)

  await go(page, '/people')
  await page.getByLabel('Search by name or address').fill(email)
  await page.getByRole('button', { name: `Change ${chosen}` }).click()
  await expect.poll(() => page.getByRole('region', { name: `Change ${chosen}` }).count(), soon).toBe(1)
  expect(await accessibilityFindings(page)).toEqual([])
  await page.getByRole('button', { name: 'Close this account' }).click()
  await page.getByRole('button', { name: 'Close the account' }).click()
  await expect.poll(() => page.getByRole('row', { name: new RegExp(chosen) }).innerText(), soon).toMatch(/closed/)
  await go(guest.page, '/following')
  expect(guest.page.url()).toMatch(/\/sign-in/)
  // the same link is good for nothing more
  await go(guest.page, address)
  await expect.poll(() => guest.page.locator('h1').innerText(), soon).toMatch(/not valid/)
  await Promise.all([context.close(), guest.context.close()])
})

it('a webhook shows its secret once, and a test that does not come through says so', async () => {
  const name = `to nowhere ${randomUUID().slice(0, 8)}`
  const { context, page } = await visit(browser)
  await signIn(page, 'admin')
  await go(page, '/webhooks')
  const form = page.getByRole('form', { name: 'Set up a webhook' })
  await form.getByLabel('Name').fill(name)
  await form.getByLabel('Address').fill('http://127.0.0.1:9/')
  await form.getByRole('button', { name: 'Set it up' }).click()
  await expect.poll(() => form.innerText(), soon).toMatch(/not public/)
  // a public address that nothing is sent to: it is switched off at once
  await form.getByLabel('Address').fill('https://1.1.1.1/lodeterm')
  await form.getByRole('button', { name: 'Set it up' }).click()
  await expect.poll(() => page.getByText('keep this secret now').count(), soon).toBe(1)
  expect(await accessibilityFindings(page)).toEqual([])
  await page.getByRole('button', { name: 'I have kept it' }).click()
  const card = page.getByRole('region', { name })
  await card.getByRole('button', { name: 'Switch off' }).click()
  await expect.poll(() => card.innerText(), soon).toMatch(/switched off/)
  await card.getByRole('button', { name: 'Deliveries' }).click()
  await expect.poll(() => card.innerText(), soon).toMatch(/Nothing was sent yet/)
  await card.getByRole('button', { name: 'Change', exact: true }).click()
  expect(await accessibilityFindings(page)).toEqual([])
  await card.getByRole('button', { name: 'Remove', exact: true }).click()
  await card.getByRole('button', { name: 'Remove for good' }).click()
  await expect.poll(() => card.count(), soon).toBe(0)
  await context.close()
})
