import Link from 'next/link'
import { Suspense } from 'react'
import { WhatIsMissing } from './_components/what-is-missing'

export default function NotFound() {
  return (
    <div className="page pt-14">
      <p className="num text-muted">404</p>
      <h1 className="mt-1">No line falls here</h1>
      <div className="prose-text mt-3">
        <p>Nothing has this address. It may be misspelt, or the level or line it names is not in the edition read; nothing was changed.</p>
        <p className="mt-3"><Link href="/">Find a level or a line</Link>, go through <Link href="/lines">Lines</Link>, or look at what each <Link href="/editions">edition</Link> holds.</p>
      </div>
      <Suspense><WhatIsMissing /></Suspense>
    </div>
  )
}
