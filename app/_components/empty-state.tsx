/** Nothing to show: what that means and what to do next. */
export function EmptyState({ title, children }: { title: string; children?: React.ReactNode }) {
  return (
    <div className="border-y border-rule py-8">
      <p className="font-text text-xl">{title}</p>
      {children ? <div className="prose-text mt-1.5 text-muted [&_ul]:mt-2 [&_ul]:list-disc [&_ul]:space-y-1 [&_ul]:pl-5">{children}</div> : null}
    </div>
  )
}
