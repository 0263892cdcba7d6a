/** The mark: one level that a field parts into three. */
export function Mark({ className = '' }: { className?: string }) {
  return (
    <svg viewBox="0 0 30 24" width="30" height="24" fill="none" strokeWidth="1.8" aria-hidden="true" className={className}>
      <path d="M1 12h9" stroke="var(--lamp)" strokeWidth="2.4" />
      <path d="M10 12l6-8h13M10 12h19M10 12l6 8h13" stroke="currentColor" strokeLinejoin="round" />
    </svg>
  )
}
