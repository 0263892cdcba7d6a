'use client'
import { useQuery, useQueryClient, type QueryClient } from '@tanstack/react-query'
import { useCallback, useEffect, useState, useSyncExternalStore } from 'react'
import { Saver } from './saver'
import { Sheet, type SheetView } from './sheet'
import { apiTransport, listChanges } from './transport'

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
}

/** The sheet of an amendment, filled from the server, saved to it, and sent off when the page closes. */
export function useSheet(amendment: string): SheetRoom {
  const client = useQueryClient()
  const [room] = useState(() => {
    const sheet = new Sheet()
    return { sheet, saver: new Saver(sheet, apiTransport(amendment), () => void refreshAmendment(client, amendment)) }
  })
  const { sheet, saver } = room
  const { data, error, isPending, refetch } = useQuery({ queryKey: changesKey(amendment), queryFn: ({ signal }) => listChanges(amendment, signal), staleTime: 0, gcTime: 0, refetchOnWindowFocus: true })
  useEffect(() => {
    if (data !== undefined) sheet.absorb(data)
  }, [data, sheet])
  useEffect(() => {
    const leave = () => saver.farewell()
    const hide = () => { if (document.visibilityState === 'hidden') void saver.now() }
    // what the server would not take cannot be sent along either: the browser asks before the page goes
    const ask = (event: BeforeUnloadEvent) => { if (sheet.rows().some((row) => row.save === 'failed' || row.save === 'conflict')) event.preventDefault() }
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
  return { sheet, saver, loading: isPending, error, reload }
}

const EMPTY: SheetView = { order: [], rows: new Map(), canUndo: null, canRedo: null }
export const useSheetView = (sheet: Sheet): SheetView => useSyncExternalStore(sheet.subscribe, sheet.view, () => EMPTY)
