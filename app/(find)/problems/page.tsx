import type { Metadata } from 'next'
import Link from 'next/link'
import { PROBLEMS, type ProblemCode } from '@/lib/problem'
import { PageHead, Part } from '../../_components/page-head'

export const metadata: Metadata = { title: 'Problem codes', description: 'Every refusal of the API: what it means and how to mend it.' }

const GROUPS: readonly { title: string; has: (status: number) => boolean }[] = [
  { title: 'The request cannot be read', has: (status) => status === 400 },
  { title: 'Who may do it', has: (status) => status === 401 || status === 403 },
  { title: 'Nothing there, or not in that way', has: (status) => [404, 405, 406, 410, 413, 415].includes(status) },
  { title: 'The state does not allow it', has: (status) => [409, 412, 428, 429].includes(status) },
  { title: 'Well formed, and not possible', has: (status) => status === 422 },
  { title: 'Faults of the server', has: (status) => status >= 500 },
]

export default function ProblemsPage() {
  const codes = Object.keys(PROBLEMS) as ProblemCode[]
  return (
    <div className="page">
      <PageHead title="Problem codes" crumbs={<Link className="link" href="/api-docs">API</Link>}>
        <p>Every refusal is a problem document that names its code, the field, and the cure. Each code has its own page; nothing is half done when one is answered.</p>
      </PageHead>
      {GROUPS.map((group) => {
        const rows = codes.filter((code) => group.has(PROBLEMS[code].status))
        return rows.length === 0 ? null : (
          <Part key={group.title} title={group.title}>
            <ul className="grid gap-x-10 md:grid-cols-2">
              {rows.map((code) => (
                <li key={code} className="border-b border-rule">
                  <Link href={`/problems/${code}`} className="flex min-h-9 items-baseline justify-between gap-4 py-1.5 hover:bg-lamp-wash">
                    <span><span className="num mr-3 text-muted">{PROBLEMS[code].status}</span>{PROBLEMS[code].title}</span>
                    <code className="min-w-0 text-right text-xs text-muted [overflow-wrap:anywhere]">{code}</code>
                  </Link>
                </li>
              ))}
            </ul>
          </Part>
        )
      })}
    </div>
  )
}
