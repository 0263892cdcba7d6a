import type { Metadata } from 'next'
import Link from 'next/link'
import { PageHead, Part } from '../../_components/page-head'
import { ApiStart } from '../_parts/api-start'
import { Reference } from '../_parts/reference'

export const metadata: Metadata = { title: 'API', description: 'The HTTP API: one contract for scripts, pages and fitting code.' }

export default function ApiPage() {
  return (
    <div className="page">
      <PageHead title="API">
        <p>Everything these pages show comes from the same HTTP API that your scripts use. Pin the edition and a request gives the same stored values next year; units stand in the names, so a number cannot be misread.</p>
      </PageHead>
      <ApiStart />
      <Part title="Habits worth knowing">
        <ul className="prose-text list-disc space-y-1.5 pl-5">
          <li>Fields take units: <code>field=1.5T</code>, <code>15kG</code>, <code>150mT</code>; a bare number is tesla.</li>
          <li>An unknown parameter is refused and the nearest known one named; nothing is ignored in silence.</li>
          <li>What a rule or filter leaves out is counted in <code>meta.excluded</code>; <code>explain=true</code> lists it.</li>
          <li><code>null</code> means not known, never zero; a status beside it says when a value does not apply.</li>
          <li>Lists are paged by <code>page.next_cursor</code>; a whole edition comes as one file from its <Link href="/editions">page</Link>.</li>
          <li>Errors are problem documents; <Link href="/problems">every code has a page</Link>.</li>
          <li>A key goes in <code>Authorization: Bearer ldt_…</code>; make one in <Link href="/account">your account</Link>.</li>
        </ul>
      </Part>
      <Part title="Every operation" aside={<a className="link" href="/api/v1/openapi.json">OpenAPI 3.1 document</a>}>
        <Reference />
      </Part>
    </div>
  )
}
