import Link from 'next/link'
import { Cautions } from '../cautions'

export function Footer() {
  return (
    <footer className="mt-20">
      <div aria-hidden="true" className="scale-edge" />
      <div className="page grid gap-x-12 gap-y-6 py-8 md:grid-cols-[minmax(0,1fr)_auto]">
        <div className="space-y-3">
          <p className="font-text text-lg">A reviewed table of atomic levels that computes its own magnetic splitting.</p>
          <p className="note max-w-[46rem]">
            Constants: CODATA 2022. Shift is counted in wavenumber, so a positive shift is to the blue; q&#8239;=&#8239;m<sub>upper</sub>&#8239;−&#8239;m
            <sub>lower</sub>, and q&#8239;=&#8239;+1 is σ⁺. Air is standard air by Ciddor 1996.
          </p>
          <Cautions />
        </div>
        <nav aria-label="Foot of the page">
          <ul className="text-sm [&_a]:inline-flex [&_a]:min-h-7 [&_a]:items-center">
            <li><Link className="link" href="/editions">Editions and how to cite</Link></li>
            <li><Link className="link" href="/sources">Sources</Link></li>
            <li><Link className="link" href="/api-docs">API reference</Link></li>
            <li><Link className="link" href="/problems">Problem codes</Link></li>
            <li><a className="link" href="/api/v1/openapi.json">OpenAPI document</a></li>
          </ul>
        </nav>
      </div>
    </footer>
  )
}
