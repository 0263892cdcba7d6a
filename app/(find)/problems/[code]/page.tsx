import type { Metadata } from 'next'
import Link from 'next/link'
import { notFound } from 'next/navigation'
import { kindOf } from '@/lib/problem'
import { PageHead } from '../../../_components/page-head'

type Props = { params: Promise<{ code: string }> }

export async function generateMetadata({ params }: Props): Promise<Metadata> {
  return { title: kindOf((await params).code)?.title ?? 'No such problem' }
}

export default async function ProblemPage({ params }: Props) {
  const { code } = await params
  const kind = kindOf(code)
  if (kind === undefined) notFound()
  return (
    <div className="page">
      <PageHead title={kind.title} crumbs={<><Link className="link" href="/problems">Problem codes</Link><code>{code}</code></>} />
      <dl className="facts max-w-3xl gap-y-4 font-text text-lg">
        <dt>Status</dt><dd className="num">{kind.status}</dd>
        <dt>What it means</dt><dd>{kind.explanation}</dd>
        <dt>How to mend it</dt><dd>{kind.cure}</dd>
        <dt>What is safe</dt><dd>A refused request changes nothing.</dd>
      </dl>
      <p className="note mt-8 max-w-[42rem]">The answer itself is a problem document (RFC 9457): <code>detail</code> says it for the request at hand, <code>errors</code> lists every place that is wrong, <code>instance</code> is the request id to quote when you ask for help.</p>
    </div>
  )
}
