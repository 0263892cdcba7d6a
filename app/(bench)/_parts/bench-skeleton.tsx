import { Skeleton } from '@/app/_components/skeleton'

/** The shape of a level or line page on its way. */
export function BenchSkeleton() {
  return (
    <div className="page pt-9">
      <Skeleton label="Loading" className="mb-3 h-10 max-w-md" />
      <div aria-hidden="true">
        <div className="skeleton mb-8 h-5 max-w-xl" />
        <div className="skeleton mb-6 h-28" />
        <div className="grid gap-8 lg:grid-cols-2">
          <div className="skeleton h-96" />
          <div className="skeleton h-96" />
        </div>
      </div>
    </div>
  )
}
