'use client'
import { CircleUser } from 'lucide-react'
import Link from 'next/link'
import { usePathname } from 'next/navigation'
import { useEdition } from '../data/edition'
import { Mark } from './mark'
import { SearchBox } from './search-box'
import { ThemeSwitch } from './theme-switch'

const ROOMS: readonly { href: string; label: string; curators?: boolean; is: (path: string) => boolean }[] = [
  { href: '/', label: 'Find', is: (path) => path === '/' || path.startsWith('/levels') || path.startsWith('/species') || path.startsWith('/sources') },
  { href: '/lines', label: 'Lines', is: (path) => path.startsWith('/lines') },
  { href: '/patterns', label: 'Patterns', is: (path) => path.startsWith('/patterns') },
  { href: '/measure-b', label: 'Measure B', is: (path) => path.startsWith('/measure-b') },
  { href: '/editions', label: 'Editions', is: (path) => path.startsWith('/editions') },
  { href: '/curate', label: 'Curate', curators: true, is: (path) => path.startsWith('/curate') },
  { href: '/api-docs', label: 'API', is: (path) => path.startsWith('/api-docs') || path.startsWith('/problems') },
]

/** The edition that every number on the page comes from; pinned ones can be let go. */
function EditionMark() {
  const { pinned, number, latest, href } = useEdition()
  const path = usePathname()
  if (number === null) return null
  const older = pinned !== null && latest !== null && pinned < latest
  return (
    <span className="flex items-center text-sm text-muted">
      <Link href={href(`/editions/${number}`)} className="inline-flex min-h-8 items-center gap-1.5 whitespace-nowrap px-1 hover:text-ink">
        <span aria-hidden="true" className={`size-2 rounded-full ${older ? 'border-2 border-lamp' : 'bg-lamp'}`} />
        Edition {number}
        {pinned === null ? '' : ', pinned'}
      </Link>
      {pinned !== null ? <Link className="link ml-1 inline-flex min-h-8 items-center text-xs" href={path}>let go</Link> : null}
    </span>
  )
}

/** `curator`: whether who looks may work on amendments; others find no room there. */
export function HeaderBar({ curator = false }: { curator?: boolean }) {
  const path = usePathname()
  return (
    <div className="page flex flex-wrap items-center gap-x-5 gap-y-1 pt-2.5 pb-1.5 lg:flex-nowrap">
      <Link href="/" className="order-1 flex min-h-9 items-center gap-2.5 font-text text-[1.4375rem] font-medium leading-none tracking-tight">
        <Mark />
        Lodeterm
      </Link>
      <nav aria-label="Main" className="order-3 -mx-2 w-full lg:order-2 lg:w-auto">
        <ul className="flex flex-wrap">
          {ROOMS.filter((room) => curator || room.curators !== true).map((room) => {
            const here = room.is(path)
            return (
              <li key={room.href}>
                <Link href={room.href} aria-current={here ? 'page' : undefined}
                  className={`inline-flex min-h-9 items-center border-b-2 px-2 pt-0.5 sm:px-2.5 ${here ? 'border-lamp font-medium text-ink' : 'border-transparent text-muted hover:border-rule-strong hover:text-ink'}`}>
                  {room.label}
                </Link>
              </li>
            )
          })}
        </ul>
      </nav>
      <div className="order-4 hidden min-w-0 flex-1 justify-end md:flex lg:order-3">
        {path !== '/' ? <div className="w-full max-w-sm"><SearchBox /></div> : null}
      </div>
      <div className="order-2 ml-auto flex items-center gap-1 lg:order-4 lg:ml-0">
        <EditionMark />
        <ThemeSwitch />
        <Link href="/account" aria-label="Your account" title="Your account" aria-current={path.startsWith('/account') || path.startsWith('/sign-in') ? 'page' : undefined}
          className="btn btn-quiet btn-small min-h-8 min-w-8 px-1.5">
          <CircleUser size={18} aria-hidden="true" />
        </Link>
      </div>
    </div>
  )
}
