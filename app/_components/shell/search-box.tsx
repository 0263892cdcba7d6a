'use client'
import { Search } from 'lucide-react'
import { useRouter } from 'next/navigation'
import { useId, type FormEvent } from 'react'
import { useEdition } from '../data/edition'

/**
 * The one search box. A plain form underneath, so it works before the page's script has arrived.
 * `key` it by the query in the address, so that a removed part leaves the box too.
 */
export function SearchBox({ initial = '', large = false }: { initial?: string; large?: boolean }) {
  const id = useId()
  const router = useRouter()
  const { pinned, href } = useEdition()
  const submit = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault()
    const q = String(new FormData(event.currentTarget).get('q') ?? '').trim()
    router.push(href(q === '' ? '/' : `/?q=${encodeURIComponent(q)}`))
  }
  return (
    <form role="search" action="/" method="get" onSubmit={submit} className="relative flex w-full min-w-0">
      <label htmlFor={id} className="sr-only">Find a level or a line</label>
      <Search size={large ? 21 : 16} aria-hidden="true" className={`pointer-events-none absolute top-1/2 -translate-y-1/2 text-muted ${large ? 'left-4' : 'left-2.5'}`} />
      <input id={id} name="q" type="search" defaultValue={initial} autoComplete="off" autoCapitalize="none" spellCheck={false} enterKeyHint="search" maxLength={400}
        placeholder={large ? 'Ion, term, wavelength or name' : 'Find a level or line'}
        className={large
          ? 'input min-h-14 rounded-r-none border-r-0 border-ink/60 pl-12 pr-3 font-text text-[1.1875rem] placeholder:text-[0.9375rem] sm:text-[1.3125rem] sm:placeholder:text-[1.3125rem]'
          : 'input min-h-8 rounded-r-none border-r-0 py-0 pl-8 pr-2 text-sm'} />
      {pinned === null ? null : <input type="hidden" name="edition" value={pinned} />}
      <button type="submit" className={large ? 'btn btn-lamp min-h-14 rounded-l-none px-5 text-base sm:px-7' : 'btn btn-small min-h-8 rounded-l-none'}>Find</button>
    </form>
  )
}
