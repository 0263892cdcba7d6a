'use client'
import { useQuery, useQueryClient, type QueryClient } from '@tanstack/react-query'
import { useCallback, useEffect, useRef, useState, useSyncExternalStore } from 'react'
import { useMe } from '../../_components/data/me'
import { Saver } from './saver'
import { Sheet, type SheetView } from './sheet'
import { openPages, pageName, storageOfBrowser } from './this-page'
import { apiTransport, listChanges } from './transport'
import { Unsent } from './unsent'

export const changesKey = (amendment: string) => ['changes', amendment] as const

/** Everything that the API tells of an amendment is asked again; the changes themselves are held by its sheet. */
export const refreshAmendment = (client: QueryClient, amendment: string) =>
  client.invalidateQueries({ predicate: ({ queryKey: [kind, path] }) => kind === 'api' && typeof path === 'string' && (path === '/me/tasks' || path === '/amendments' || (path.startsWith(`/amendments/${amendment}`) && !path.includes('/changes/'))) })

export interface SheetRoom {
  sheet: Sheet
  saver: Saver
  loading: boolean
  error: unknown
  reload: () => Promise<unknown>
  /** Brings back what an earlier page could not send, once it may be edited; resolves to the number of rows. */
  restore: () => Promise<number>
}

/** The sheet of an amendment, filled from the server, saved to it, and sent off when the page closes. */
export function useSheet(amendment: string): SheetRoom {
  const client = useQueryClient()
  const [room] = useState(() => {
    const sheet = new Sheet()
    return { sheet, saver: new Saver(sheet, apiTransport(amendment), () => void refreshAmendment(client, amendment)) }
  })
  const { sheet, saver } = room
  const { me } = useMe()
  const person = me?.id
  const keeping = useRef<Unsent | null>(null)
  const { data, error, isPending, refetch } = useQuery({ queryKey: changesKey(amendment), queryFn: ({ signal }) => listChanges(amendment, signal), staleTime: 0, gcTime: 0, refetchOnWindowFocus: true })
  useEffect(() => {
    if (data !== undefined) sheet.absorb(data)
  }, [data, sheet])
  useEffect(() => {
    if (person === undefined) return
    const page = pageName()
    const keeper = new Unsent(sheet, storageOfBrowser(), `lodeterm/unsent/${person}/${amendment}`, page.name)
    keeping.current = keeper
    keeper.keep()
    const stop = sheet.subscribe(() => keeper.keep())
    return () => {
      // another page of this site: what is being saved is waited for, and the rest stays for the next one
      void saver.now().finally(() => {
        stop()
        page.end()
      })
    }
  }, [amendment, person, saver, sheet])
  useEffect(() => {
    const leave = () => {
      keeping.current?.keep(Date.now())
      saver.farewell()
    }
    const hide = () => { if (document.visibilityState === 'hidden') void saver.now() }
    // what cannot be sent along: the browser asks before the page goes
    const ask = (event: BeforeUnloadEvent) => { if (saver.mustAsk(keeping.current?.safe ?? false)) event.preventDefault() }
    window.addEventListener('beforeunload', ask)
    window.addEventListener('pagehide', leave)
    document.addEventListener('visibilitychange', hide)
    return () => {
      window.removeEventListener('beforeunload', ask)
      window.removeEventListener('pagehide', leave)
      document.removeEventListener('visibilitychange', hide)
      // another page of this site: the tab goes on, and so may the saving
      void saver.now()
    }
  }, [sheet, saver])
  const reload = useCallback(async () => {
    await saver.now()
    await refetch()
  }, [saver, refetch])
  const restore = useCallback(async () => {
    if (person === undefined || isPending || error !== null) return 0
    const open = await openPages()
    const count = await keeping.current?.restore(open, async () => sheet.absorb(await listChanges(amendment)))
    if (count === undefined) return 0
    if (count > 0) saver.later()
    return count
  }, [amendment, error, isPending, person, saver, sheet])
  return { sheet, saver, loading: isPending, error, reload, restore }
}

const EMPTY: SheetView = { order: [], rows: new Map(), canUndo: null, canRedo: null }
export const useSheetView = (sheet: Sheet): SheetView => useSyncExternalStore(sheet.subscribe, sheet.view, () => EMPTY)
