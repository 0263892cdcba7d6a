import { type Browser, type BrowserContext, chromium } from 'playwright-core'
import { inject } from 'vitest'

// Root may not use Chromium's sandbox; the other switches keep the browser from asking anything of the outside.
const SWITCHES = ['--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking', '--disable-component-update', '--disable-sync', '--disable-dev-shm-usage']

/** Debian's Chromium, without a window. Close it after use. */
export const launchBrowser = (): Promise<Browser> => chromium.launch({ executablePath: process.env.CHROMIUM ?? '/usr/bin/chromium', args: SWITCHES })

/** A fresh visitor of the server under test: no cookies, the theme and the width of window asked for, copying allowed. */
export async function visitor(browser: Browser, options: { theme?: 'light' | 'dark'; width?: number; height?: number } = {}): Promise<BrowserContext> {
  const context = await browser.newContext({
    baseURL: inject('baseUrl'), colorScheme: options.theme ?? 'light', viewport: { width: options.width ?? 1440, height: options.height ?? 900 }, reducedMotion: 'reduce',
  })
  await context.grantPermissions(['clipboard-read', 'clipboard-write'])
  return context
}
