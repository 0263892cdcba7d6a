/** The head of a page: where it stands, its name, and a line of what it is. */
export function PageHead({ title, children, crumbs, aside }: { title: React.ReactNode; children?: React.ReactNode; crumbs?: React.ReactNode; aside?: React.ReactNode }) {
  return (
    <div className="flex flex-wrap items-end justify-between gap-x-10 gap-y-4 pt-7 pb-6 sm:pt-9">
      <div className="min-w-0">
        {crumbs ? <div className="note mb-2 flex flex-wrap items-center gap-x-2 [&_a]:inline-flex [&_a]:min-h-6 [&_a]:items-center">{crumbs}</div> : null}
        <h1>{title}</h1>
        {children ? <div className="prose-text mt-2 text-muted">{children}</div> : null}
      </div>
      {aside}
    </div>
  )
}

/** A part of a page, its heading hanging on a rule. */
export function Part({ title, aside, children, id }: { title: React.ReactNode; aside?: React.ReactNode; children: React.ReactNode; id?: string }) {
  return (
    <section className="part" id={id}>
      <div className="mb-3 flex flex-wrap items-baseline justify-between gap-x-6 gap-y-1">
        <h2>{title}</h2>
        {aside ? <div className="note">{aside}</div> : null}
      </div>
      {children}
    </section>
  )
}
