import Link from 'next/link'
import { redirect } from 'next/navigation'
import type { Account } from '@/openapi/schemas/session'
import { getConfig } from '@/lib/config'
import { serverGet } from '../../_components/data/server-get'

interface Room { href: string; label: string; admin?: boolean; local?: boolean }
const ROOMS: readonly Room[] = [
  { href: '/account', label: 'Account' },
  { href: '/following', label: 'Following' },
  { href: '/outbox', label: 'Outbox', local: true },
  { href: '/people', label: 'People', admin: true },
  { href: '/webhooks', label: 'Webhooks', admin: true },
  { href: '/audit', label: 'Audit', admin: true },
]

/** The pages that belong to a signed-in person, with the way from one to the other; a stranger is asked to sign in first. */
export async function AccountFrame({ here, query = '', children }: { here: string; query?: string; children: React.ReactNode }) {
  const me = await serverGet<Account>('/me')
  if (me === null) redirect(`/sign-in?next=${encodeURIComponent(`${here}${query}`)}`)
  const outbox = getConfig().outboxFolder !== undefined
  const rooms = ROOMS.filter((room) => (room.admin !== true || me.data.role === 'admin') && (room.local !== true || outbox || here === room.href))
  return (
    <>
      <nav aria-label="Account" className="page pt-4">
        <ul className="-mx-2 flex flex-wrap border-b border-rule">
          {rooms.map((room) => (
            <li key={room.href}>
              <Link href={room.href} aria-current={room.href === here ? 'page' : undefined}
                className={`-mb-px inline-flex min-h-8 items-center border-b-2 px-2 text-sm ${room.href === here ? 'border-lamp font-medium text-ink' : 'border-transparent text-muted hover:border-rule-strong hover:text-ink'}`}>
                {room.label}
              </Link>
            </li>
          ))}
        </ul>
      </nav>
      {children}
    </>
  )
}
