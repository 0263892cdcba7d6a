import type { Evidence as Grade } from '@/openapi/schemas/common'

const MEANING: Record<Grade, string> = {
  read: 'read in the publication named',
  quoted: 'quoted from a text that quotes the publication named',
  recalled: 'recalled from memory; the publication named is where it is believed to stand, and it waits to be checked',
  computed: 'computed from other values of the table',
}

/** The mark fills with how far the value was checked: full, half, open; a square for what was computed. */
function Mark({ grade }: { grade: Grade }) {
  return (
    <svg viewBox="0 0 10 10" width="9" height="9" aria-hidden="true" className="inline-block shrink-0 align-[-0.02em]">
      {grade === 'computed' ? (
        <rect x="1.2" y="1.2" width="7.6" height="7.6" fill="none" stroke="currentColor" strokeWidth="1.4" />
      ) : (
        <circle cx="5" cy="5" r="4" fill={grade === 'read' ? 'currentColor' : 'none'} stroke="currentColor" strokeWidth="1.4" strokeDasharray={grade === 'recalled' ? '2 1.6' : undefined} />
      )}
      {grade === 'quoted' ? <path d="M5 1a4 4 0 0 1 0 8z" fill="currentColor" /> : null}
    </svg>
  )
}

const TINT: Record<Grade, string> = { read: 'text-good', quoted: 'text-ink', recalled: 'text-warn', computed: 'text-muted' }

/** How far a value was checked against its source, in a word with a mark of its own. */
export function Evidence({ grade, className = '' }: { grade: Grade; className?: string }) {
  return (
    <span className={`inline-flex items-center gap-1 whitespace-nowrap text-xs ${TINT[grade]} ${className}`} title={MEANING[grade]}>
      <Mark grade={grade} />
      {grade}
    </span>
  )
}

/** The four words explained, for the foot of a page that shows them. */
export function EvidenceKey() {
  return (
    <dl className="note flex flex-wrap gap-x-6 gap-y-1">
      {(Object.keys(MEANING) as Grade[]).map((grade) => (
        <div key={grade} className="flex max-w-[22rem] items-baseline gap-2">
          <dt>
            <Evidence grade={grade} />
          </dt>
          <dd>{MEANING[grade]}</dd>
        </div>
      ))}
    </dl>
  )
}
