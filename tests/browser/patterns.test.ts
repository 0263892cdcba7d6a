import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { accessibilityFindings, base, go, openBrowser, visit } from './browser'

let browser: Browser
beforeAll(async () => {
  browser = await openBrowser()
})
afterAll(async () => {
  await browser.close()
})

const SODIUM = '/patterns?lines=Na-I.1~Na-I.2,Na-I.1~Na-I.3&field=1T'
const rows = (page: Page) => page.getByRole('table', { name: /Components of all lines/ }).locator('tbody tr')
const parameter = (page: Page, name: string) => new URL(page.url()).searchParams.get(name)
const reading = (page: Page) => page.locator('figure').filter({ has: page.locator('[data-plot=patterns]') }).locator('output').innerText()

describe('patterns of several lines', () => {
  it('begin with examples, and take lines by nickname', async () => {
    const { context, page, complaints } = await visit(browser)
    await go(page, '/patterns')
    await expect.poll(() => page.locator('#main').innerText()).toContain('No line is in the picture yet')
    expect(await accessibilityFindings(page)).toEqual([])
    await page.getByLabel('Add lines', { exact: true }).last().fill('Na D')
    await page.keyboard.press('Enter')
    await page.getByRole('button', { name: 'Add all 2' }).click()
    await expect.poll(() => rows(page).count()).toBe(10)
    expect(parameter(page, 'lines')).toBe('Na-I.1~Na-I.2,Na-I.1~Na-I.3')
    await page.getByRole('button', { name: /^Remove Na I 589\.59/ }).click()
    await expect.poll(() => rows(page).count()).toBe(6)
    expect(complaints).toEqual([])
    await context.close()
  })

  it('compute what the API answers to 1e-12', async () => {
    const { context, page } = await visit(browser)
    await go(page, `${SODIUM}&theta=60`)
    await expect.poll(() => rows(page).count()).toBe(10)
    const shown = await rows(page).evaluateAll((all) => all.map((row) => [...row.querySelectorAll('[title]')].map((cell) => Number(cell.getAttribute('title')))))
    for (const [line, first] of [['Na-I.1~Na-I.2', 0], ['Na-I.1~Na-I.3', 4]] as const) {
      const answer = (await (await fetch(`${base}/api/v1/transitions/${line}/components?field=1T&theta_deg=60&model=intermediate`)).json()) as { data: { components: { wavenumber_invcm: number; intensity: number }[] } }
      answer.data.components.forEach((component, i) => {
        for (const value of [component.wavenumber_invcm, component.intensity]) {
          const nearest = Math.min(...(shown[first + i] ?? []).filter(Number.isFinite).map((number) => Math.abs(number - value)))
          expect(nearest, `component ${i} of ${line}`).toBeLessThanOrEqual(1e-12 * Math.max(1, Math.abs(value)))
        }
      })
    }
    await context.close()
  })

  it('show a window that is dragged, typed or stepped, all of it in the address', async () => {
    const { context, page } = await visit(browser)
    await go(page, SODIUM)
    const picture = page.getByRole('group', { name: /Components in order along the axis/ })
    await picture.scrollIntoViewIfNeeded()
    const box = await picture.boundingBox()
    if (box === null) throw new Error('the picture has no place')
    await page.mouse.move(box.x + 2, box.y + 40)
    await page.mouse.down()
    await page.mouse.move(box.x + box.width / 4, box.y + 60, { steps: 4 })
    await page.mouse.up()
    // the left quarter holds D2 alone
    await expect.poll(() => reading(page)).toMatch(/^6 components of 1 line/)
    await expect.poll(() => parameter(page, 'window')).not.toBeNull()
    const [from = 0, to = 0] = (parameter(page, 'window') ?? '').split(',').map(Number)
    await page.getByRole('button', { name: 'Look closer' }).click()
    await expect.poll(() => { const [a = 0, b = 0] = (parameter(page, 'window') ?? '').split(',').map(Number); return (b - a) / (to - from) }).toBeCloseTo(0.5, 3)
    await page.getByRole('button', { name: 'Show all lines' }).click()
    await expect.poll(() => parameter(page, 'window')).toBeNull()
    await picture.focus()
    await page.keyboard.press('ArrowRight')
    await expect.poll(() => reading(page)).toMatch(/^2 Na.*σ\+, m/)
    await context.close()
  })

  it('mark where lines blend, and give the request behind the curve', async () => {
    const { context, page } = await visit(browser)
    await go(page, '/patterns?lines=Li-I.1~Li-I.2,Li-I.1~Li-I.3&field=2T&resolving=20000')
    await expect.poll(() => page.locator('#main').innerText()).toMatch(/Lines blend in \d+ stretch/)
    await page.getByText('The request behind this view').click()
    const shown = await page.locator('pre code').innerText()
    const body = JSON.parse(/-d '([\s\S]*)'$/.exec(shown)?.[1] ?? '{}') as Record<string, unknown>
    const answer = await fetch(`${base}/api/v1/profiles`, { method: 'POST', headers: { 'content-type': 'application/json' }, body: JSON.stringify(body) })
    expect([answer.status, body.resolving_power]).toEqual([200, 20000])
    await context.close()
  })

  it.each([['light', 1440], ['dark', 390], ['light', 320]] as const)('are accessible and fit their width (%s, %d px)', async (theme, width) => {
    const { context, page, complaints } = await visit(browser, { theme, width })
    await go(page, `${SODIUM}&theta=30`)
    await expect.poll(() => rows(page).count()).toBe(10)
    expect(await accessibilityFindings(page)).toEqual([])
    expect(await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth)).toBeLessThanOrEqual(0)
    expect(complaints).toEqual([])
    await context.close()
  })
})
