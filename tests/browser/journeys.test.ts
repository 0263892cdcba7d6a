import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest'
import { base, go, openBrowser, visit } from './browser'

let browser: Browser
beforeAll(async () => {
  browser = await openBrowser()
})
afterAll(async () => {
  await browser.close()
})

const main = (page: Page): Promise<string> => page.locator('#main').innerText()
const componentRows = (page: Page) => page.getByRole('table', { name: /Components of/ }).locator('tbody tr')

describe('the sodium D lines in a field', () => {
  it('from the search box to the line, to 1.5 T, where the linear law is 2.8 % off for 3p J = 1/2', async () => {
    const { context, page } = await visit(browser)
    await go(page, '/')
    await page.getByRole('main').getByRole('searchbox').fill('sodium D1')
    await page.keyboard.press('Enter')
    await page.waitForURL(/q=sodium/)
    await page.getByRole('main').locator('a[href*="/lines/Na-I.1~Na-I.2"]').first().click()
    await page.waitForURL(/\/lines\/Na-I\.1~Na-I\.2/)
    await expect.poll(() => componentRows(page).count()).toBe(4)
    const field = page.getByRole('textbox', { name: 'Field, B' })
    await field.fill('15kG')
    await field.press('Enter')
    await expect.poll(() => new URL(page.url()).searchParams.get('field')).toBe('15kG')
    await expect.poll(() => main(page)).toMatch(/2\.8 ?%/)
    await page.reload({ waitUntil: 'networkidle' })
    await expect.poll(() => main(page)).toMatch(/2\.8 ?%/)
    await context.close()
  })

  it('D2 has six components, and the page computes what the API answers to 1e-12', async () => {
    const { context, page } = await visit(browser)
    await go(page, '/lines/Na-I.1~Na-I.3?field=1.5T&theta=60')
    await expect.poll(() => componentRows(page).count()).toBe(6)
    const answer = (await (await fetch(`${base}/api/v1/transitions/Na-I.1~Na-I.3/components?field=1.5T&theta_deg=60`)).json()) as {
      data: { components: { wavenumber_invcm: number; shift_invcm: number; intensity: number }[] }
    }
    // full digits stand in each cell's title
    const shown = await componentRows(page).evaluateAll((rows) => rows.map((row) => [...row.querySelectorAll('[title]')].map((cell) => Number(cell.getAttribute('title')))))
    answer.data.components.forEach((component, index) => {
      for (const value of [component.wavenumber_invcm, component.shift_invcm, component.intensity]) {
        const nearest = Math.min(...(shown[index] ?? []).filter(Number.isFinite).map((number) => Math.abs(number - value)))
        expect(nearest, `component ${index}: ${value}`).toBeLessThanOrEqual(1e-12 * Math.max(1, Math.abs(value)))
      }
    })
    await context.close()
  })

  it('a field that cannot be read is refused beside the box, with the units that can', async () => {
    const { context, page } = await visit(browser)
    await go(page, '/lines/Na-I.1~Na-I.3')
    const field = page.getByRole('textbox', { name: 'Field, B' })
    await field.fill('3furlong')
    await field.press('Enter')
    await expect.poll(() => page.locator('[role=alert]').filter({ hasText: 'furlong' }).innerText()).toMatch(/kG/)
    expect(await field.inputValue()).toBe('3furlong')
    await context.close()
  })

  it('can be driven by the keyboard alone', async () => {
    const { context, page } = await visit(browser)
    await go(page, '/lines/Na-I.1~Na-I.3?field=1T')
    const slider = page.getByRole('slider').first()
    await slider.focus()
    const before = await slider.getAttribute('aria-valuetext')
    await page.keyboard.press('ArrowRight')
    await expect.poll(() => slider.getAttribute('aria-valuetext')).not.toBe(before)
    // the plot is one stop in the tab order; arrows move through its components and name them
    const mark = page.locator('svg [tabindex="0"]').first()
    await mark.focus()
    const first = await page.evaluate(() => document.activeElement?.getAttribute('aria-label'))
    await page.keyboard.press('ArrowRight')
    const second = await page.evaluate(() => document.activeElement?.getAttribute('aria-label'))
    expect(first).toBeTruthy()
    expect(second).toBeTruthy()
    expect(second).not.toBe(first)
    await context.close()
  })

  it('saves its plot, and copies its table', async () => {
    const { context, page } = await visit(browser)
    await context.grantPermissions(['clipboard-read', 'clipboard-write'], { origin: base })
    await go(page, '/lines/Na-I.1~Na-I.3?field=1.5T')
    await expect.poll(() => componentRows(page).count()).toBe(6)
    const menu = page.getByRole('button', { name: /Copy table/ }).first()
    await menu.click()
    await page.getByText('as CSV', { exact: false }).first().click()
    await expect.poll(() => page.evaluate(() => navigator.clipboard.readText())).toMatch(/shift_invcm/)
    const copied = await page.evaluate(() => navigator.clipboard.readText())
    expect(copied.trim().split(/\r?\n/)).toHaveLength(7)
    await context.close()
  })
})

describe('finding', () => {
  it('a bare number is asked about, not guessed, and the answer leads on', async () => {
    const { context, page } = await visit(browser)
    await go(page, '/?q=6302.5')
    const question = page.getByRole('region', { name: 'A question back' })
    await expect.poll(() => question.getByRole('link').count()).toBeGreaterThan(1)
    await question.getByRole('link', { name: /Å/ }).first().click()
    await expect.poll(() => page.locator('#main a[href*="/lines/Fe-I."]').count()).toBeGreaterThan(0)
    await context.close()
  })

  it('each understood part can be taken away', async () => {
    const { context, page } = await visit(browser)
    await go(page, '/?q=Na+I+2P*')
    const cross = page.getByRole('link', { name: /Take away 2P\*/ })
    await expect.poll(() => cross.count()).toBe(1)
    await cross.click()
    await expect.poll(() => new URL(page.url()).searchParams.get('q')).toBe('Na I')
    await context.close()
  })

  it('a window over all species lists the lines in it, with what was left out and why', async () => {
    const { context, page } = await visit(browser)
    await go(page, '/lines?wavelength_min_nm=253&wavelength_max_nm=254')
    await expect.poll(() => main(page)).toMatch(/Hg/)
    await context.close()
  })
})

describe('judging and decoding', () => {
  it('a forbidden pair names the rule that forbids it', async () => {
    const { context, page } = await visit(browser)
    // He I 1s2 1S0 and 1s2s 1S0: same parity, and J = 0 to J = 0
    await go(page, '/lines/He-I.1~He-I.3')
    await expect.poll(() => main(page)).toMatch(/forbidden/i)
    expect(await main(page)).toMatch(/J = 0/)
    await context.close()
  })

  it('a level shows its g_J as a fraction, with the real g_s, and measured, and where each came from', async () => {
    const { context, page } = await visit(browser)
    await go(page, '/levels/Na-I.2')
    await expect.poll(() => main(page)).toMatch(/2\/3/)
    const text = await main(page)
    expect(text).toMatch(/0\.66589/)
    expect(text).toMatch(/0\.66581/)
    expect(text).toMatch(/recalled/)
    expect(text).toMatch(/sansonetti/i)
    await context.close()
  })

  it('the edition of a link stays with it', async () => {
    const { context, page } = await visit(browser)
    await go(page, '/species/Na-I?edition=1')
    await page.getByRole('main').getByRole('table').locator('a[href^="/levels/Na-I.2"]').first().click()
    await page.waitForURL(/\/levels\/Na-I\.2/)
    expect(new URL(page.url()).searchParams.get('edition')).toBe('1')
    // the request stands folded away
    await expect.poll(() => page.locator('#main').textContent()).toMatch(/levels\/Na-I\.2\?edition=1/)
    await context.close()
  })
})

describe('accounts', () => {
  it('a reader signs in, makes a key that is shown once and works, revokes it and it stops, signs out', async () => {
    const account = inject('demoAccounts').find((one) => one.role === 'reader')
    expect(account).toBeDefined()
    if (account === undefined) return
    const { context, page } = await visit(browser)
    await go(page, '/sign-in')
    await page.getByLabel('Email').fill(account.email)
    await page.getByLabel('Password').fill(account.password)
    await page.getByRole('button', { name: 'Sign in' }).click()
    await page.waitForURL(/\/account/)
    await expect.poll(() => main(page)).toContain(account.email)

    const name = `journey ${Date.now()}`
    await page.getByLabel('Name', { exact: true }).fill(name)
    await page.getByRole('button', { name: 'Make key' }).click()
    const once = page.getByRole('status').filter({ hasText: 'keep this key now' })
    await expect.poll(() => once.count()).toBe(1)
    const key = /ldt_[A-Za-z0-9_]+/.exec(await once.innerText())?.[0] ?? ''
    const me = () => fetch(`${base}/api/v1/me`, { headers: { authorization: `Bearer ${key}` } })
    expect((await me()).status).toBe(200)
    expect((await fetch(`${base}/api/v1/amendments`, { headers: { authorization: `Bearer ${key}` } })).status).toBe(403)
    await page.reload({ waitUntil: 'networkidle' })
    expect(await main(page)).not.toContain(key)

    await page.getByRole('button', { name: `Revoke ${name}` }).click()
    await page.getByRole('button', { name: 'Revoke for good' }).click()
    await expect.poll(async () => (await me()).status).toBe(401)

    await page.getByRole('button', { name: /Sign out/ }).first().click()
    await expect.poll(async () => (await context.request.get('/api/v1/me')).status()).toBe(401)
    await context.close()
  })

  it('a wrong password is refused in words that do not tell whether the account exists', async () => {
    const { context, page } = await visit(browser)
    const words: string[] = []
    for (const email of [inject('demoAccounts')[0]?.email ?? '', 'nobody@lodeterm.example']) {
      await go(page, '/sign-in')
      await page.getByLabel('Email').fill(email)
      await page.getByLabel('Password').fill('certainly not the password')
      await page.getByRole('button', { name: 'Sign in' }).click()
      const alert = page.locator('#main [role=alert]')
      await expect.poll(() => alert.count()).toBeGreaterThan(0)
      words.push(await alert.first().innerText())
    }
    expect(words[0]).toBe(words[1])
    await context.close()
  })
})
