import type { Browser, Locator, Page } from 'playwright-core'
import { expect } from 'vitest'
import { go, type Theme, type Visit, visit } from '../browser/browser'
import type { Instance } from '../support/instance'

/** What curators do on the curate pages of an instance, and what the server holds of it. */
export interface Curator extends Visit { signed: Awaited<ReturnType<Instance['signIn']>>; instance: Instance }

/** Opens a browser window for one of the demo accounts, signed in. */
export const curators = (instance: Instance, browser: Browser) => async (who: string, options: { theme?: Theme; width?: number; height?: number } = {}): Promise<Curator> => {
  const signed = await instance.signIn(who)
  const visitor = await visit(browser, { ...options, at: instance.base })
  const [name = '', value = ''] = signed.cookie.split('=')
  await visitor.context.addCookies([{ name, value, url: instance.base }])
  return { ...visitor, signed, instance }
}
export const begun = async ({ signed, instance }: Curator, title: string): Promise<string> => (await instance.ask('post', '/amendments', { ...signed, body: { title } })).json.data.id

export interface Stored { subject: string; action: string; values: Record<string, unknown>; findings: { severity: string; code: string }[]; author: { name: string }; comment: string | null }
export const stored = async ({ signed, instance }: Curator, amendment: string): Promise<Stored[]> => (await instance.get(`/amendments/${amendment}/changes`, signed)).json.data
export const storedOf = async (curator: Curator, amendment: string, subject: string): Promise<Stored | undefined> => (await stored(curator, amendment)).find((change) => change.subject === subject)

export async function openTable(page: Page, amendment: string, species = 'Na-I'): Promise<void> {
  await go(page, `/curate/${amendment}?show=${species}`)
  await page.getByRole('grid').waitFor()
}
export async function cell(page: Page, level: string, column: string): Promise<Locator> {
  const index = await page.getByRole('columnheader', { name: new RegExp(`^${column}`) }).first().getAttribute('aria-colindex')
  return page.locator('[role=row]').filter({ has: page.locator('[role=rowheader]', { hasText: new RegExp(`^${level.replace('.', '\\.')}(?!\\d)`) }) }).locator(`[aria-colindex="${index}"]`)
}
export async function typeInto(page: Page, level: string, column: string, text: string): Promise<void> {
  await (await cell(page, level, column)).click()
  await page.keyboard.type(text)
  await page.keyboard.press('Enter')
}
export const isSaved = (page: Page) => expect.poll(() => page.locator('[data-saved]').getAttribute('data-saved'), { timeout: 15_000 }).toBe('true')
/** What a spreadsheet puts on the clipboard, pasted where the focus is. */
export const paste = (page: Page, text: string) =>
  page.evaluate((block) => {
    const data = new DataTransfer()
    data.setData('text/plain', block)
    document.activeElement?.dispatchEvent(new ClipboardEvent('paste', { clipboardData: data, bubbles: true, cancelable: true }))
  }, text)
export const focused = (page: Page) => page.evaluate(() => ({ row: document.activeElement?.closest('[role=row]')?.getAttribute('aria-rowindex'), column: document.activeElement?.getAttribute('aria-colindex'), role: document.activeElement?.getAttribute('role') }))
export const panel = (page: Page) => page.getByRole('complementary', { name: /^The row in focus/ }).innerText()
