import { X } from 'lucide-react'
import Link from 'next/link'

/** An understood part of a query. The cross takes it away; `href` is the view without it. */
export function Chip({ kind, children, href, onRemove, removeLabel }: {
  kind?: string; children: React.ReactNode; href?: string; onRemove?: () => void; removeLabel: string
}) {
  const cross = <X size={14} aria-hidden="true" />
  const shape = 'inline-flex min-h-7 min-w-7 items-center justify-center self-stretch border-l border-rule text-muted hover:bg-lamp-wash hover:text-ink'
  return (
    <span className="inline-flex min-h-7 items-stretch rounded-sm border border-rule-strong bg-sheet text-sm">
      <span className="flex items-baseline gap-1.5 px-2.5 py-1">
        {kind ? <span className="text-xs text-muted">{kind}</span> : null}
        <span>{children}</span>
      </span>
      {href !== undefined ? (
        <Link className={shape} href={href} aria-label={removeLabel} scroll={false}>
          {cross}
        </Link>
      ) : onRemove ? (
        <button type="button" className={shape} onClick={onRemove} aria-label={removeLabel}>
          {cross}
        </button>
      ) : null}
    </span>
  )
}
