import AxeBuilder from '@axe-core/playwright'
import { type Browser, type BrowserContext, chromium, type Page } from 'playwright-core'
import { inject } from 'vitest'

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

/** A fresh visitor. Motion is reduced, so that nothing is caught half-way. */
export async function visit(browser: Browser, { theme = 'light', width = 1440, height = 900, at = base }: { theme?: Theme; width?: number; height?: number; at?: string } = {}): Promise<Visit> {
  const context = await browser.newContext({ baseURL: at, colorScheme: theme, reducedMotion: 'reduce', viewport: { width, height } })
  const page = await context.newPage()
  const complaints: string[] = []
  page.on('console', (message) => {
    if (message.type() === 'error' || message.type() === 'warning') complaints.push(`${message.type()}: ${message.text()}`)
  })
  page.on('pageerror', (error) => complaints.push(`thrown: ${error.message}`))
  page.on('response', (response) => {
    if (response.status() >= 500) complaints.push(`${response.status()} ${response.url()}`)
  })
  return { context, page, complaints }
}

/** Goes to a page and waits until it has what it asked the API for. */
export async function go(page: Page, path: string): Promise<void> {
  await page.goto(path, { waitUntil: 'networkidle' })
}

/** WCAG 2.2 A and AA findings, each with the place. The API reference is a widget of its own; the page's frame around it is checked. */
export async function accessibilityFindings(page: Page): Promise<string[]> {
  const { violations } = await new AxeBuilder({ page }).withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa']).exclude('.swagger-ui').analyze()
  return violations.flatMap((violation) => violation.nodes.map((node) => `${violation.id}: ${node.target.join(' ')} (${violation.help})`))
}

/** How many pixels the page is wider than the window: a page scrolls down, not sideways. */
export const overflow = (page: Page): Promise<number> => page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth)
