import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { accessibilityFindings, go, openBrowser, overflow, type Theme, visit } from './browser'

let browser: Browser
beforeAll(async () => {
  browser = await openBrowser()
})
afterAll(async () => {
  await browser.close()
})

// three components of Na D2, of those of the reference vectors (case D2-like: 0.8004 T in the linear law, sigmas of 3 to 6 thousandths)
const POSITIONS = [['16972.73584', '0.006'], ['16973.49179', '0.002'], ['16973.99492', '0.006']] as const
const ROWS = POSITIONS.map((row) => row.join(',')).join(';')
const WITH_ROWS = `/measure-b?lines=Na-I.1~Na-I.3&unit=cm-1&p=${ROWS}`

const fieldOf = async (page: Page): Promise<number> => Number((await page.locator('[data-field-tesla]').getAttribute('data-field-tesla', { timeout: 20_000 })) ?? Number.NaN)
const fieldNear = (page: Page, tesla: number) => expect.poll(() => fieldOf(page), { timeout: 20_000 }).toBeCloseTo(tesla, 2)

describe('Measure B', () => {
  it('from the name of a line and three positions to the field', async () => {
    const { context, page, complaints } = await visit(browser)
    await go(page, '/measure-b')
    await page.getByLabel('Which line was measured?').fill('D2')
    await page.getByRole('button', { name: /^Na\s*I\s+588\.9/ }).click()
    await page.getByLabel('Unit').selectOption('cm-1')
    for (const [i, [position, unc]] of POSITIONS.entries()) {
      await page.getByLabel(`Position, cm⁻¹ ${i + 1}`, { exact: true }).fill(position)
      await page.getByLabel(`Uncertainty ${i + 1}`, { exact: true }).fill(unc)
    }
    // the spread of the two fits by hand is a hundredth of a tesla, one standard deviation 5 mT
    await fieldNear(page, 0.81)
    const shown = await page.locator('[data-field-tesla]').innerText()
    expect(shown).toMatch(/B = 0\.80\d+\(\d+\)\sT/)
    expect(await page.getByText('Expanded, k = 2').count()).toBe(1)
    for (const unit of ['mT', 'kG']) {
      await page.getByLabel(unit, { exact: true }).check()
      expect(await page.locator('[data-field-tesla]').innerText()).toContain(unit)
    }
    // everything stands in the address, and gives the same page to whoever opens it
    await expect.poll(() => decodeURIComponent(page.url())).toContain(ROWS)
    await expect.poll(() => page.url()).toContain('show=kG')
    const other = await visit(browser)
    await go(other.page, page.url())
    expect(await fieldOf(other.page)).toBe(await fieldOf(page))
    await other.context.close()
    expect(complaints).toEqual([])
    await context.close()
  })

  it('a pasted column with decimal commas is read, and a component named by hand is kept', async () => {
    const { context, page } = await visit(browser)
    await go(page, '/measure-b?lines=Na-I.1~Na-I.3&unit=cm-1')
    const first = page.getByLabel('Position, cm⁻¹ 1', { exact: true })
    await first.focus()
    await first.evaluate((input, text) => {
      const data = new DataTransfer()
      data.setData('text', text)
      input.dispatchEvent(new ClipboardEvent('paste', { clipboardData: data, bubbles: true, cancelable: true }))
    }, 'Position\tsigma\n16972,73584\t0,006\n16973,49179\t0,002\n16973,99492\t0,006\n')
    await expect.poll(() => page.getByLabel('Position, cm⁻¹ 3', { exact: true }).inputValue()).toBe('16973.99492')
    expect(await page.getByText('3 rows pasted; 1 without a number left out.').count()).toBe(1)
    await fieldNear(page, 0.81)
    await page.getByLabel('Component of 1', { exact: true }).selectOption('c-1.1')
    await page.getByLabel('Component of 3', { exact: true }).selectOption('c1.-1')
    // named the other way round, the field is reversed
    await expect.poll(() => fieldOf(page), { timeout: 20_000 }).toBeLessThan(0)
    await context.close()
  })

  it('says why two peaks of one component fix nothing, and offers other readings where there are any', async () => {
    const { context, page } = await visit(browser)
    await go(page, '/measure-b?lines=Na-I.1~Na-I.3&unit=cm-1&p=16973.1,,c1.3;16973.2,,c1.3')
    await expect.poll(() => page.locator('#main').innerText(), { timeout: 20_000 }).toMatch(/do not fix the field yet[\s\S]*measure another component/)
    await go(page, '/measure-b?lines=Na-I.1~Na-I.3&unit=cm-1&model=linear&p=16973,0.001;16973.5,0.001')
    await page.getByRole('button', { name: 'Take this reading' }).first().click()
    await expect.poll(() => page.url()).toMatch(/c-?\d+\.-?\d+/)
    expect(await page.getByLabel('Component of 1', { exact: true }).inputValue()).not.toBe('')
    await context.close()
  })

  it('g from a known field', async () => {
    const { context, page } = await visit(browser)
    await go(page, '/measure-b?lines=Na-I.1~Na-I.3&unit=cm-1&unknown=g&field=0.8T&p=16972.73584,0.006,c1.-1;16973.49179,0.002,c-1.-1;16973.99492,0.006,c-1.1')
    await expect.poll(async () => Number(await page.locator('[data-g]').getAttribute('data-g', { timeout: 20_000 })), { timeout: 20_000 }).toBeCloseTo(4 / 3, 1)
    await context.close()
  })

  it('by keyboard alone: search, choose, type down a column', async () => {
    const { context, page } = await visit(browser)
    await go(page, '/measure-b?unit=cm-1')
    await page.getByLabel('Which line was measured?').focus()
    await page.keyboard.type('D2')
    await page.getByRole('button', { name: /^Na\s*I\s+588\.9/ }).waitFor()
    await page.keyboard.press('Tab')
    await page.keyboard.press('Enter')
    await page.getByLabel('Position, cm⁻¹ 1', { exact: true }).waitFor()
    for (let i = 0; i < 40 && !(await page.evaluate(() => document.activeElement?.getAttribute('data-cell') === 'value 0')); i += 1) await page.keyboard.press('Tab')
    for (const [position] of POSITIONS) {
      await page.keyboard.type(position)
      await page.keyboard.press('Enter')
    }
    await fieldNear(page, 0.81)
    await context.close()
  })

  it('the example is one step away and says that it is invented', async () => {
    const { context, page } = await visit(browser)
    await go(page, '/measure-b')
    await page.getByRole('button', { name: 'Show an example' }).first().click()
    await fieldNear(page, 0.8)
    expect(await page.getByText('An example with invented data.').count()).toBe(1)
    await page.getByLabel('Position, nm 1', { exact: true }).fill('588.9738')
    await expect.poll(() => page.getByText('An example with invented data.').count()).toBe(0)
    await context.close()
  })

  it('prints on one page, with inputs, result, budget, edition and date', async () => {
    const { context, page } = await visit(browser)
    await go(page, WITH_ROWS)
    await fieldNear(page, 0.81)
    const pdf = (await page.pdf({ format: 'A4', margin: { top: '12mm', bottom: '12mm', left: '12mm', right: '12mm' } })).toString('latin1')
    expect(pdf.match(/\/Type\s*\/Page\b/g)).toHaveLength(1)
    await page.emulateMedia({ media: 'print' })
    const text = await page.locator('body').innerText()
    expect(text).toMatch(/edition 1, CODATA 2022/)
    expect(text).toMatch(/printed \d+ \w+ \d{4}/)
    expect(text).toContain('16973.49179')
    expect(text).toContain('Measured positions')
    expect(text).toContain('not a calibration certificate')
    expect(await page.getByLabel('Unit').isVisible()).toBe(false)
    await context.close()
  })

  it.each<[Theme, number]>([['light', 1440], ['dark', 1440], ['light', 390], ['dark', 320]])('%s, %i px: accessible, quiet, no wider than the window', async (theme, width) => {
    const { context, page, complaints } = await visit(browser, { theme, width, height: 844 })
    await go(page, WITH_ROWS)
    await fieldNear(page, 0.81)
    await page.getByText('Zeros and covariance').click()
    await page.getByText('Scale, angle and model').click()
    expect(await accessibilityFindings(page)).toEqual([])
    expect(await overflow(page)).toBe(0)
    expect(complaints).toEqual([])
    await context.close()
  })
})
