/** The shape of what is coming. `label` is what a screen reader hears once. */
export function Skeleton({ label = 'Loading', className = 'h-5 w-full' }: { label?: string; className?: string }) {
  return (
    <div role="status" aria-label={label} aria-busy="true">
      <div className={`skeleton ${className}`} />
    </div>
  )
}

const WIDTHS = [0.62, 0.84, 0.5, 0.72, 0.9, 0.58]

/** Rows of a table that is on its way. */
export function TableSkeleton({ rows = 6, columns = 5, label = 'Loading the table' }: { rows?: number; columns?: number; label?: string }) {
  return (
    <div role="status" aria-label={label} aria-busy="true" className="border-t border-rule-strong">
      {Array.from({ length: rows }, (_, row) => (
        <div key={row} className="flex gap-6 border-b border-rule py-2.5">
          {Array.from({ length: columns }, (_, column) => (
            <div key={column} className="flex-1">
              <div className="skeleton h-4" style={{ width: `${(WIDTHS[(row + column) % WIDTHS.length] ?? 0.7) * 100}%` }} />
            </div>
          ))}
        </div>
      ))}
    </div>
  )
}
