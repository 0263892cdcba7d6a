import { reasonText } from './names'
import { plural } from './number'

/** What a list left out and why, counted by reason, so that a missing row has an answer. */
export function Excluded({ counts, what = 'line' }: { counts: Record<string, number> | undefined; what?: string }) {
  const entries = Object.entries(counts ?? {}).filter(([, count]) => count > 0).sort(([, a], [, b]) => b - a)
  if (entries.length === 0) return null
  const total = entries.reduce((sum, [, count]) => sum + count, 0)
  return (
    <details className="note">
      <summary className="inline-flex min-h-7 list-none items-center gap-1.5 hover:text-ink">
        <span className="link">{plural(total, what)} left out, and why</span>
      </summary>
      <ul className="mt-1 space-y-0.5 border-l-2 border-rule pl-3">
        {entries.map(([reason, count]) => (
          <li key={reason}>
            <span className="num inline-block min-w-10 text-right font-medium text-ink">{count}</span> {reasonText(reason)}
          </li>
        ))}
      </ul>
    </details>
  )
}
