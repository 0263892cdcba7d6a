import type { Metadata, Viewport } from 'next'
import { HydrationBoundary } from '@tanstack/react-query'
import { headers } from 'next/headers'
import { Suspense } from 'react'
import type { Account } from '@/openapi/schemas/session'
import '@fontsource-variable/inter/wght.css'
import '@fontsource-variable/stix-two-text/wght.css'
import '@fontsource-variable/stix-two-text/wght-italic.css'
import '@fontsource-variable/jetbrains-mono/wght.css'
import './globals.css'
import { prefetch } from './_components/data/prefetch'
import { serverGet } from './_components/data/server-get'
import { Footer } from './_components/shell/footer'
import { HeaderBar } from './_components/shell/header'
import { Providers } from './_components/shell/providers'

export const metadata: Metadata = {
  title: { default: 'Lodeterm', template: '%s · Lodeterm' },
  description: 'A reviewed table of atomic levels that computes its own magnetic splitting.',
}
export const viewport: Viewport = {
  themeColor: [
    { media: '(prefers-color-scheme: light)', color: '#f2f4f1' },
    { media: '(prefers-color-scheme: dark)', color: '#12171a' },
  ],
}

/** Strangers, who bring no cookie, are not asked after. */
async function isCurator(): Promise<boolean> {
  if (!/lodeterm=/.test((await headers()).get('cookie') ?? '')) return false
  const me = await serverGet<Account>('/me')
  return me !== null && me.data.role_in_force !== 'reader'
}

export default async function RootLayout({ children }: { children: React.ReactNode }) {
  // Every page says which edition is in force, so the list of editions comes with the first answer.
  const [state, curator] = await Promise.all([prefetch([['/editions']]), isCurator()])
  return (
    <html lang="en" suppressHydrationWarning>
      <body>
        <a href="#main" className="skip btn btn-lamp">Skip to the content</a>
        <Providers>
          <HydrationBoundary state={state}>
            <header className="no-print bg-sheet">
              <Suspense fallback={<div className="h-14" />}>
                <HeaderBar curator={curator} />
              </Suspense>
              <div aria-hidden="true" className="scale-edge border-t border-rule-strong" />
            </header>
            <main id="main" tabIndex={-1} className="flex-1 outline-none">{children}</main>
            <Footer />
          </HydrationBoundary>
        </Providers>
      </body>
    </html>
  )
}
