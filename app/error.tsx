'use client'
import { ProblemView } from './_components/problem-view'

/** A fault while drawing a page. */
export default function PageError({ error, reset }: { error: Error & { digest?: string }; reset: () => void }) {
  return (
    <div className="page pt-12">
      <ProblemView heading="h1" onRetry={reset} problem={{
        type: 'about:blank', title: 'This page could not be drawn', status: 500, detail: 'Something failed while the page was being made.', instance: error.digest,
      }} />
    </div>
  )
}
