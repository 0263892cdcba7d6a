import type { ApiMeta } from './data/api'
import { Notice } from './notice'

/** What the API warned of in this answer, in its own words. */
export function Warnings({ meta }: { meta: ApiMeta | undefined }) {
  const warnings = meta?.warnings ?? []
  if (warnings.length === 0) return null
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
