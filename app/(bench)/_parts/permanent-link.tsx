'use client'
import { useSearchParams } from 'next/navigation'
import { useSyncExternalStore } from 'react'
import { CopyButton } from '@/app/_components/copy-button'
import { useEdition } from '@/app/_components/data/edition'

const never = () => () => undefined

/** The address of exactly this view, its edition written in, so that it shows the same next year. */
export function PermanentLink({ path }: { path: string }) {
  const search = useSearchParams()
  const { number } = useEdition()
  const origin = useSyncExternalStore(never, () => window.location.origin, () => '')
  const query = new URLSearchParams(search.toString())
  if (number !== null) query.set('edition', String(number))
  const text = query.toString()
  const address = `${origin}${path}${text === '' ? '' : `?${text}`}`
  return (
    <section aria-label="Permanent link" className="part no-print flex flex-wrap items-center justify-between gap-3">
      <div className="min-w-0">
        <h2 className="text-lg">Permanent link</h2>
        <a href={address} className="link block font-mono text-xs break-all">{address}</a>
      </div>
      <CopyButton text={address} label="Copy link" />
    </section>
  )
}
