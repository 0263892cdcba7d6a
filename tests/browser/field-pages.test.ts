import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { accessibilityFindings, base, goUntil, openBrowser, overflow, type Theme, visit } from './browser'

let browser: Browser
beforeAll(async () => {
  browser = await openBrowser()
})
afterAll(async () => {
  await browser.close()
})

const main = (page: Page): Promise<string> => page.locator('#main').innerText()
const rowsOf = (page: Page, name: RegExp) => page.getByRole('table', { name }).locator('tbody tr')

/** What the API answers. */
async function answer<T>(path: string): Promise<{ data: T; meta: Record<string, unknown> }> {
  const response = await fetch(`${base}/api/v1${path}`)
  expect(response.status, path).toBe(200)
  return (await response.json()) as { data: T; meta: Record<string, unknown> }
}

/** Full digits stand in the titles of a table's cells, row by row. */
const titlesOf = (page: Page, name: RegExp): Promise<number[][]> =>
  rowsOf(page, name).evaluateAll((rows) => rows.map((row) => [...row.querySelectorAll('[title]')].map((cell) => Number(cell.getAttribute('title'))).filter(Number.isFinite)))

/** Each value of each row stands among the numbers of the same row of the page, to 1e-12 of itself. */
function expectShown(shown: readonly number[][], rows: readonly (readonly number[])[]): void {
  expect(shown).toHaveLength(rows.length)
  rows.forEach((values, index) => {
    for (const value of values) {
      const nearest = Math.min(...(shown[index] ?? []).map((number) => Math.abs(number - value)))
      expect(nearest, `row ${index}: ${value}`).toBeLessThanOrEqual(1e-12 * Math.abs(value))
    }
  })
}

interface Component {
  shift_invcm: number
  wavenumber_invcm: number
  strength: number
  derivative_invcm_per_tesla: number
}

describe('lithium 670.8 nm from 0 to 5 T', () => {
  it('is linear by auto at a small field and diagonalised at 5 T, and both are named', async () => {
    const { context, page } = await visit(browser)
    await goUntil(page, '/lines/Li-I.1~Li-I.3?field=1mT', /linear \(weak field\), chosen by auto/)
    const field = page.getByRole('textbox', { name: 'Field, B' })
    await field.fill('5T')
    await field.press('Enter')
    await expect.poll(() => main(page)).toMatch(/intermediate \(diagonalised within the term\), chosen by auto/)
    expect(await main(page)).toMatch(/J = 1\/2 and 3\/2 are mixing: linear is off by/)
    await page.getByLabel('Linear', { exact: true }).check()
    await expect.poll(() => new URL(page.url()).searchParams.get('model')).toBe('linear')
    expect(await main(page)).toMatch(/linear \(weak field\)/)
    // the request behind the view asks what the page shows
    await expect.poll(() => page.locator('#main').textContent()).toMatch(/components\?[^\s]*model=linear/)
    await context.close()
  })

  it('shows the numbers of the API at 5 T to 1e-12', async () => {
    const { context, page } = await visit(browser)
    await goUntil(page, '/lines/Li-I.1~Li-I.3?field=5T', /intermediate/)
    const { data } = await answer<{ model: string; components: Component[] }>('/transitions/Li-I.1~Li-I.3/components?field=5T')
    expect(data.model).toBe('intermediate')
    await expect.poll(() => rowsOf(page, /^Components of/).count()).toBe(data.components.length)
    expectShown(
      await titlesOf(page, /^Components of/),
      data.components.map((one) => [one.shift_invcm, one.wavenumber_invcm, one.strength, one.derivative_invcm_per_tesla]),
    )
    await context.close()
  })

  it('bends its components towards a triplet and marks on the fan where the linear law fails, with high-field names at the edge', async () => {
    const { context, page } = await visit(browser)
    await goUntil(page, '/lines/Li-I.1~Li-I.3?field=5T', /Components against field/)
    const { data } = await answer<{ components: { shift_lorentz: number; strength: number; q: number }[] }>('/transitions/Li-I.1~Li-I.3/components?field=5T')
    // of D2 the linear shifts are +-1/3, +-1 and +-5/3; at 5 T what is strong lies within a tenth of -1, 0 and +1 (the fine structure over mu_B B)
    for (const { shift_lorentz, strength, q } of data.components) if (strength > 0.1) expect(Math.abs(shift_lorentz - q)).toBeLessThan(0.1)
    const fan = page.locator('figure').filter({ has: page.locator('[data-plot$="-upper-sublevels"]') })
    expect(await fan.innerText()).toMatch(/Hatched: from 0\.\d+ T on the linear law is off by more than 1 %/)
    const drawn = await fan.locator('svg[role=group]').textContent()
    expect(drawn).toMatch(/linear off by over 1 % from 0\.\d+ T/)
    // M_L, M_S of the highest sublevel of 2P3/2
    expect(drawn).toMatch(/1, 1\/2/)
    // curves: a path of many points, and the dashed line of the linear law beside it
    expect(await fan.locator('svg[role=group] g[data-mark] path').first().getAttribute('d')).toMatch(/(L[^L]+){20,}/)
    await context.close()
  })
})

describe('with nuclear spin, on request', () => {
  it('the line of rubidium 87 shows the components of the API, and remembers the isotope in its address', async () => {
    const { context, page } = await visit(browser)
    await goUntil(page, '/lines/Rb-I.1~Rb-I.3?field=100G', /Components/)
    await page.getByLabel('Hyperfine structure').check()
    await expect.poll(() => page.getByLabel('Isotope').count()).toBe(1)
    await page.getByLabel('Isotope').selectOption('87')
    await expect.poll(() => new URL(page.url()).search).toMatch(/hyperfine=true.*isotope=87|isotope=87.*hyperfine=true/)
    const { data } = await answer<{ components: { detuning_mhz: number; wavenumber_invcm: number; strength: number }[] }>('/transitions/Rb-I.1~Rb-I.3/components?field=100G&hyperfine=true&isotope=87')
    await expect.poll(() => rowsOf(page, /^Hyperfine components of/).count()).toBe(data.components.length)
    expectShown(await titlesOf(page, /^Hyperfine components of/), data.components.map((one) => [one.detuning_mhz, one.wavenumber_invcm, one.strength]))
    expect(await main(page)).toMatch(/which is 100\sG/)
    await context.close()
  })

  it('the ground level of rubidium 87 to 1 T has its eight sublevels, and two that keep their distance near 3.229 G', async () => {
    const { context, page } = await visit(browser)
    await goUntil(page, '/levels/Rb-I.1?field=1T&hyperfine=true&isotope=87&a=1,-1&b=2,1&to=10G', /stationary/)
    const { data } = await answer<{ energy_mhz: number; derivative_mhz_per_tesla: number }[]>('/levels/Rb-I.1/sublevels?field=1T&hyperfine=true&isotope=87')
    expect(data).toHaveLength(8)
    await expect.poll(() => rowsOf(page, /^Hyperfine sublevels of/).count()).toBe(8)
    expectShown(await titlesOf(page, /^Hyperfine sublevels of/), data.map((one) => [one.energy_mhz, one.derivative_mhz_per_tesla]))
    expect(await main(page)).toMatch(/3\.22\d+/)
    await context.close()
  })
})

describe('the level page', () => {
  it('diagonalises 2p 2P* J = 3/2 of lithium at 5 T as the API does', async () => {
    const { context, page } = await visit(browser)
    await goUntil(page, '/levels/Li-I.3?field=5T', /intermediate \(diagonalised/)
    const { data } = await answer<{ shift_invcm: number; derivative_invcm_per_tesla: number; m_l: number; m_s: number }[]>('/levels/Li-I.3/sublevels?field=5T')
    await expect.poll(() => rowsOf(page, /^Sublevels of/).count()).toBe(4)
    expectShown(await titlesOf(page, /^Sublevels of/), data.map((one) => [one.shift_invcm, one.derivative_invcm_per_tesla]))
    await context.close()
  })
})

describe('the profile', () => {
  it('has Stokes V with an angle, says its sign, and is as wide as the address asks', async () => {
    const { context, page } = await visit(browser)
    await goUntil(page, '/lines/Na-I.1~Na-I.2?field=1T&theta=0&fwhm=0.2', /Seen with an instrument/)
    expect(await main(page)).toMatch(/One component is 0\.2 cm⁻¹ wide/)
    expect(await main(page)).toMatch(/counter-clockwise as the observer sees it/)
    const figure = page.locator('figure').filter({ has: page.locator('[data-plot$="-profile"]') })
    await figure.getByRole('button', { name: 'Table' }).click()
    // shift, I, Q, V of each point
    const rows = await figure.locator('tbody tr').evaluateAll((all) => all.map((row) => [...row.querySelectorAll('[title]')].map((cell) => Number(cell.getAttribute('title')))))
    expect(rows.length).toBeGreaterThan(20)
    // seen along the field sigma+ (to the blue) turns counter-clockwise: V > 0, and nowhere there below
    const blue = rows.filter((row) => (row[0] ?? 0) > 0.3).map((row) => row[3] ?? Number.NaN)
    expect(Math.max(...blue)).toBeGreaterThan(0.1)
    expect(Math.min(...blue)).toBeGreaterThanOrEqual(0)
    await context.close()
  })
})

describe('the profile of an isotope', () => {
  it('shows the two groups of rubidium 87 that the ground level makes, 6.8 GHz apart', async () => {
    const { context, page } = await visit(browser)
    await goUntil(page, '/lines/Rb-I.1~Rb-I.3?field=0T&hyperfine=true&isotope=87&fwhm=0.03', /Seen with an instrument/)
    const figure = page.locator('figure').filter({ has: page.locator('[data-plot$="-profile"]') })
    await figure.getByRole('button', { name: 'Table' }).click()
    // shift in cm^-1 and I of each point
    const rows = await figure.locator('tbody tr').evaluateAll((all) => all.map((row) => [...row.querySelectorAll('[title]')].map((cell) => Number(cell.getAttribute('title')))))
    const highest = (side: number[][]) => side.reduce((best, row) => ((row[1] ?? 0) > (best[1] ?? 0) ? row : best), [0, 0])[0] ?? 0
    const [red, blue] = [highest(rows.filter((row) => (row[0] ?? 0) < 0)), highest(rows.filter((row) => (row[0] ?? 0) > 0))]
    // 2 A = 6834.7 MHz is 0.228 cm^-1; the groups are not narrow, their upper levels lying over 0.017 cm^-1
    expect(blue - red).toBeGreaterThan(0.21)
    expect(blue - red).toBeLessThan(0.245)
    await context.close()
  })
})

describe('in both themes and on a narrow screen', () => {
  const PAGES = [
    { path: '/lines/Li-I.1~Li-I.3?field=5T&theta=45', shows: /intermediate/ },
    { path: '/lines/Rb-I.1~Rb-I.3?field=100G&hyperfine=true&isotope=87', shows: /Hyperfine components/ },
    { path: '/levels/Li-I.3?field=5T', shows: /intermediate/ },
    { path: '/levels/Rb-I.1?field=1T&hyperfine=true&isotope=87&a=1,-1&b=2,1&to=10G', shows: /stationary/ },
  ]
  it.each(PAGES)('$path is accessible and does not scroll sideways', async ({ path, shows }) => {
    for (const theme of ['light', 'dark'] as Theme[]) {
      const { context, page, complaints } = await visit(browser, { theme, width: theme === 'light' ? 390 : 1440 })
      await goUntil(page, path, shows)
      expect(await overflow(page), theme).toBeLessThanOrEqual(0)
      expect(await accessibilityFindings(page), theme).toEqual([])
      expect(complaints, theme).toEqual([])
      await context.close()
    }
  })
})
