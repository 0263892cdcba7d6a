import type { ApiMeta } from './data/api'
import { Notice } from './notice'

/** What the API warned of in this answer, in its own words. */
export function Warnings({ meta, quiet = false }: { meta: ApiMeta | undefined; quiet?: boolean }) {
  const warnings = meta?.warnings ?? []
  if (warnings.length === 0) return null
  if (quiet) return <div className="note mt-4">{warnings.map((warning, index) => <p key={`${warning.code} ${index}`}>{warning.detail}</p>)}</div>
  return (
    <div className="my-4">
      <Notice tone="warn" role="status">
        {warnings.map((warning, index) => (
          <p key={`${warning.code} ${index}`}>{warning.detail}</p>
        ))}
      </Notice>
    </div>
  )
}
