import { CircleAlert, CircleCheck, Info, TriangleAlert } from 'lucide-react'

const LOOK = {
  info: { icon: Info, edge: 'border-l-rule-strong', tint: 'text-muted' },
  good: { icon: CircleCheck, edge: 'border-l-good', tint: 'text-good' },
  warn: { icon: TriangleAlert, edge: 'border-l-warn', tint: 'text-warn' },
  bad: { icon: CircleAlert, edge: 'border-l-bad', tint: 'text-bad' },
} as const

/** A plain sentence that the reader should see, with a mark as well as a colour. */
export function Notice({ tone = 'info', title, children, role }: {
  tone?: keyof typeof LOOK; title?: React.ReactNode; children?: React.ReactNode; role?: 'status' | 'alert'
}) {
  const { icon: Icon, edge, tint } = LOOK[tone]
  return (
    <div role={role} className={`flex gap-3 border border-l-[3px] border-rule bg-sheet px-3.5 py-2.5 text-sm ${edge}`}>
      <Icon size={17} aria-hidden="true" className={`mt-0.5 shrink-0 ${tint}`} />
      <div className="min-w-0 space-y-1">
        {title ? <p className="font-medium">{title}</p> : null}
        {children}
      </div>
    </div>
  )
}
