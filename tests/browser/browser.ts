import axe from 'axe-core'
import { type Browser, type BrowserContext, chromium, type Page } from 'playwright-core'
import { expect, inject } from 'vitest'

export const base = inject('baseUrl')
export type Theme = 'light' | 'dark'

const FLAGS = ['--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking', '--disable-component-update', '--disable-sync']

/** Debian's Chromium; its place comes with the test environment. */
export const openBrowser = (): Promise<Browser> => chromium.launch({ executablePath: inject('environment').CHROMIUM ?? '/usr/bin/chromium', args: FLAGS })

export interface Visit {
  context: BrowserContext
  page: Page
  /** What the console complained of, and answers that failed, in order. */
  complaints: string[]
}

/** Writes down what a page complains of from now on. */
function listen(page: Page): string[] {
  const complaints: string[] = []
  page.on('console', (message) => {
    if (message.type() === 'error' || message.type() === 'warning') complaints.push(`${message.type()}: ${message.text()}`)
  })
  page.on('pageerror', (error) => complaints.push(`thrown: ${error.message}`))
  page.on('response', (response) => {
    if (response.status() >= 500) complaints.push(`${response.status()} ${response.url()}`)
  })
  return complaints
}

/** A fresh visitor. Motion is reduced, so that nothing is caught half-way. */
export async function visit(browser: Browser, { theme = 'light', width = 1440, height = 900, at = base }: { theme?: Theme; width?: number; height?: number; at?: string } = {}): Promise<Visit> {
  const context = await browser.newContext({ baseURL: at, colorScheme: theme, reducedMotion: 'reduce', viewport: { width, height } })
  const page = await context.newPage()
  return { context, page, complaints: listen(page) }
}

/** Goes to a page and waits until it has what it asked the API for. */
export async function go(page: Page, path: string): Promise<void> {
  await page.goto(path, { waitUntil: 'networkidle' })
}

/** Goes to a page that has its content when these words are there: half a second less than waiting for a network at rest. */
export async function goUntil(page: Page, path: string, shows: RegExp): Promise<void> {
  await page.goto(path, { waitUntil: 'load' })
  await expect.poll(() => page.locator('#main').innerText(), { timeout: 15_000, message: path }).toMatch(shows)
}

const STANDARD = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa']

/**
 * WCAG 2.2 A and AA findings, each with the place. The API reference is a widget of its own; the page's frame around it is checked. Axe
 * describes only what it finds wrong: to describe all that is right takes longer than to look.
 */
export async function accessibilityFindings(page: Page): Promise<string[]> {
  expect(page.frames(), 'axe is put into one document').toHaveLength(1)
  if (!(await page.evaluate(() => 'axe' in window))) await page.evaluate(axe.source)
  return page.evaluate(async (tags) => {
    const { axe: inPage } = window as unknown as { axe: typeof axe }
    const { violations } = await inPage.run({ exclude: [['.swagger-ui']] }, { runOnly: tags, resultTypes: ['violations'] })
    return violations.flatMap((violation) => violation.nodes.map((node) => `${violation.id}: ${node.target.join(' ')} (${violation.help})`))
  }, STANDARD)
}

/** How many pixels the page is wider than the window: a page scrolls down, not sideways. */
export const overflow = (page: Page): Promise<number> => page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth)

const WIDTHS = [320, 390, 1440] as const

/**
 * Looks a page over in both themes and at every width. It is loaded twice, as light on a wide window and as dark on a narrow one, since a
 * theme and a width can go wrong at the first drawing too; the context keeps its cache and who is signed in.
 */
export async function lookOver(context: BrowserContext, { path, shows }: { path: string; shows: RegExp }): Promise<void> {
  for (const theme of ['light', 'dark'] as const) {
    const page = await context.newPage()
    const complaints = listen(page)
    const place = `${path} in the ${theme} theme`
    await page.emulateMedia({ colorScheme: theme, reducedMotion: 'reduce' })
    await page.setViewportSize({ width: theme === 'light' ? 1440 : WIDTHS[0], height: 844 })
    await goUntil(page, path, shows)
    expect(await page.title(), place).not.toBe('')
    expect(await page.locator('h1:not(.swagger-ui h1)').count(), place).toBe(1)
    for (const width of theme === 'light' ? [1440] : WIDTHS) {
      await page.setViewportSize({ width, height: 844 })
      await drawn(page)
      expect(await overflow(page), `${place}, ${width} pixels wide`).toBeLessThanOrEqual(0)
    }
    expect(await accessibilityFindings(page), place).toEqual([])
    expect(complaints, place).toEqual([])
    await page.close()
  }
}

/** Two frames on: what watches sizes has heard of a new one, and has drawn. */
export const drawn = (page: Page): Promise<void> => page.evaluate(() => new Promise((done) => { requestAnimationFrame(() => requestAnimationFrame(() => done())) }))
