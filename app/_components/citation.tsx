'use client'
import { useQuery } from '@tanstack/react-query'
import { useState } from 'react'
import type { Citation } from '@/openapi/schemas/edition'
import { CopyButton } from './copy-button'
import { apiQuery, type ApiQuery } from './data/api'
import { ProblemView } from './problem-view'
import { Skeleton } from './skeleton'

const FORMS = [
  { id: 'text', label: 'Text', copy: 'Copy citation' },
  { id: 'bibtex', label: 'BibTeX', copy: 'Copy BibTeX' },
  { id: 'csl', label: 'CSL-JSON', copy: 'Copy CSL-JSON' },
] as const

/** How to cite something, in the three forms that people paste. */
export function HowToCite({ path, query, name }: { path: string; query?: ApiQuery; name: string }) {
  const [form, setForm] = useState<(typeof FORMS)[number]['id']>('text')
  const { data, error, isPending, refetch } = useQuery(apiQuery<Citation>(`${path}/citation`, query))
  if (error) return <ProblemView error={error} onRetry={() => void refetch()} heading="h3" />
  if (isPending) return <Skeleton label="Loading the citation" className="h-24 max-w-3xl" />
  const citation = data.data
  const texts = { text: citation.text, bibtex: citation.bibtex, csl: JSON.stringify([citation.csl_json], null, 2) }
  return (
    <div className="max-w-3xl">
      <div role="group" aria-label={`Form of the citation of ${name}`} className="no-print mb-3 flex flex-wrap gap-x-1">
        {FORMS.map(({ id, label }) => (
          <button key={id} type="button" aria-pressed={form === id} onClick={() => setForm(id)}
            className={`min-h-8 border-b-2 px-2 text-sm ${form === id ? 'border-lamp font-medium text-ink' : 'border-transparent text-muted hover:border-rule-strong hover:text-ink'}`}>{label}</button>
        ))}
      </div>
      {form === 'text' ? <blockquote className="prose-text border-l-2 border-lamp pl-4 [overflow-wrap:anywhere]">{texts.text}</blockquote> : (
        <pre tabIndex={0} className="overflow-x-auto border border-rule bg-sheet p-3 text-[0.8125rem] leading-relaxed"><code>{texts[form]}</code></pre>
      )}
      <div className="no-print mt-3 flex flex-wrap gap-2">{FORMS.map(({ id, copy }) => <CopyButton key={id} text={texts[id]} label={copy} />)}</div>
    </div>
  )
}
