import type { Browser, BrowserContext } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest'
import { lookOver, openBrowser, visit } from './browser'

/** Every page a visitor can open, with the words that show it has its content. */
const PAGES: readonly { path: string; shows: RegExp }[] = [
  { path: '/', shows: /Find a level or a line/ },
  { path: '/?q=sodium+D1', shows: /589\.59/ },
  { path: '/?q=6302.5', shows: /6302\.5/ },
  { path: '/lines?wavelength_min_nm=588&wavelength_max_nm=590', shows: /Na/ },
  { path: '/lines/Na-I.1~Na-I.2?field=1.5T', shows: /2\.8/ },
  { path: '/lines/Na-I.2~Na-I.3', shows: /M1/ },
  { path: '/patterns?lines=Na-I.1~Na-I.2,Na-I.1~Na-I.3&field=1T', shows: /Components[\s\S]*589\.6/ },
  { path: '/levels/Na-I.2', shows: /0\.66581/ },
  { path: '/levels/Ne-I.2', shows: /1s5/ },
  { path: '/species/Fe-I', shows: /iron/i },
  { path: '/editions', shows: /First edition/ },
  { path: '/editions/1', shows: /[0-9a-f]{16}/ },
  { path: '/sources', shows: /J\. Phys\. Chem\. Ref\. Data/ },
  { path: '/problems', shows: /invalid_input/ },
  { path: '/problems/invalid_input', shows: /request/i },
  { path: '/sign-in', shows: /Password/ },
  { path: '/measure-b?lines=Na-I.1~Na-I.3&unit=cm-1&p=16972.73584,0.006;16973.49179,0.002;16973.99492,0.006', shows: /0\.80\d+\(\d+\)/ },
  { path: '/api-docs', shows: /API/ },
]

let browser: Browser
let context: BrowserContext
beforeAll(async () => {
  browser = await openBrowser()
  context = await browser.newContext({ baseURL: inject('baseUrl') })
})
afterAll(async () => {
  await browser.close()
})

describe('in both themes and at every width', () => {
  it.each(PAGES)('$path is accessible, quiet, does not scroll sideways, and has its content', (page) => lookOver(context, page))
})

it('what does not exist is a 404 that says what is missing, and no error of ours', async () => {
  const { context, page, complaints } = await visit(browser)
  const missing = ['/levels/Na-I.9999', '/levels/na-i.1', '/lines/Na-I.1~Na-I.9999', '/lines/nonsense?field=3furlong', '/species/Xx-I', '/sources/no-such', '/editions/77', '/levels/Na-I.1?edition=77', '/nowhere', '/levels/%00', '/levels/%ff']
  for (const path of missing) {
    const response = await page.goto(path, { waitUntil: 'load' })
    expect(response?.status(), path).toBe(404)
    await expect.poll(() => page.locator('h1').innerText(), { message: path }).toMatch(/No line falls here/)
  }
  await page.goto('/levels/Na-I.9999', { waitUntil: 'networkidle' })
  await expect.poll(() => page.locator('#main').innerText()).toMatch(/Na-I\.9999/)
  expect(complaints.filter((complaint) => /^(thrown|5)/.test(complaint))).toEqual([])
  await context.close()
})
