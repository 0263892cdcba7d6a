'use client'
import { useSyncExternalStore, useState } from 'react'
import { CopyButton } from './copy-button'
import { useEdition } from './data/edition'
import { LANGUAGES, requestText, type RequestLanguage, type ShownRequest } from './request-text'

const never = () => () => undefined
/** The page's own origin, known in the browser only. */
const useOrigin = (): string => useSyncExternalStore(never, () => window.location.origin, () => '')

/** The address of the view as it stands, with the edition it reads. */
function permanentLink(edition: number | null): string {
  const address = new URL(window.location.href)
  if (edition !== null) address.searchParams.set('edition', String(edition))
  return address.href
}

/**
 * "The request behind this view": the API call that gives these numbers, ready to copy, with the edition pinned
 * so that it gives the same numbers next year.
 */
export function RequestPanel({ path, query = {}, method, body, unpinned = false, title = 'The request behind this view', open = false, withLink = !unpinned }: ShownRequest & { unpinned?: boolean; title?: string; open?: boolean; withLink?: boolean }) {
  const [language, setLanguage] = useState<RequestLanguage>('curl')
  const { number } = useEdition()
  const origin = useOrigin()
  const pinned = unpinned || number === null ? query : { ...query, edition: number }
  const text = requestText(language, origin, { path, query: pinned, method, body })
  return (
    <section aria-label={title} className="no-print part">
      <details className="group" open={open}>
        <summary className="flex min-h-9 list-none flex-wrap items-center justify-between gap-3">
          <h2 className="text-lg">
            <span aria-hidden="true" className="mr-2 inline-block text-lamp-ink transition-transform group-open:rotate-90">▸</span>
            {title}
          </h2>
          <code className="hidden max-w-full truncate text-xs text-muted md:block">{`${method ?? 'GET'} /api/v1${path}`}</code>
        </summary>
        <div className="mt-3">
          <div className="flex flex-wrap items-center justify-between gap-2">
            <div role="group" aria-label="Language" className="flex gap-1">
              {LANGUAGES.map(({ id, label }) => (
                <button key={id} type="button" aria-pressed={language === id} onClick={() => setLanguage(id)}
                  className={`min-h-8 border-b-2 px-2.5 text-sm ${language === id ? 'border-lamp font-medium text-ink' : 'border-transparent text-muted hover:text-ink'}`}>
                  {label}
                </button>
              ))}
            </div>
            <CopyButton text={text} label="Copy request" />
          </div>
          <pre className="mt-2 overflow-x-auto border border-rule bg-well p-3 text-xs leading-relaxed" tabIndex={0}>
            <code>{text}</code>
          </pre>
          {unpinned ? null : <p className="note mt-2">{number === null ? 'The edition in force is not known yet.' : `Edition ${number} is pinned: the same request gives the same stored values next year.`}</p>}
        </div>
      </details>
      {!withLink ? null : (
        <p className="mt-3 flex flex-wrap items-center gap-x-3 gap-y-1">
          <CopyButton text={() => permanentLink(number)} label="Copy permanent link" />
          <span className="note">to this view{number === null ? '' : `, edition ${number} pinned`}</span>
        </p>
      )}
    </section>
  )
}
