'use client'
import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query'
import { useEffect, useState } from 'react'
import type { Import } from '@/openapi/schemas/import'
import { apiGet, apiPath, apiSend, type ApiAnswer, ApiError, readAnswer } from '../../_components/data/api'
import { refreshAmendment, type SheetRoom } from '../_sheet/use-sheet'
import { type Reading, uploadParts } from './mapping'

async function upload(amendment: string, file: File, reading: Reading, dryRun: boolean): Promise<Import> {
  const form = new FormData()
  for (const [name, text] of uploadParts(reading)) form.append(name, text)
  form.append('file', file, file.name)
  let response: Response
  try {
    response = await fetch(apiPath(`/amendments/${amendment}/import`, { dry_run: dryRun, wait: false }), { method: 'POST', body: form, credentials: 'same-origin', headers: { accept: 'application/json' } })
  } catch {
    throw new ApiError({ type: 'about:blank', title: 'The file could not be sent', status: 0, detail: 'The server could not be reached, or the file was moved or edited since it was chosen: choose it again.' })
  }
  return (await readAnswer<ApiAnswer<Import>>(response)).data
}

/** One file on its way: sent, followed while it is read, stopped when asked. */
export function useImport(amendment: string, room: SheetRoom) {
  const client = useQueryClient()
  const [started, setStarted] = useState<Import | null>(null)
  const id = started?.id
  const path = `/amendments/${amendment}/imports/${id ?? ''}`
  const { data, error: pollError } = useQuery({
    queryKey: ['import', amendment, id], queryFn: ({ signal }) => apiGet<Import>(path, undefined, signal), enabled: id !== undefined && started?.state === 'running',
    refetchInterval: ({ state }) => (state.data === undefined || state.data.data.state === 'running' ? 500 : false), staleTime: 0,
  })
  const now = data?.data ?? started
  const send = useMutation({
    mutationFn: async ({ file, reading, dryRun }: { file: File; reading: Reading; dryRun: boolean }) => {
      await room.saver.now()
      return upload(amendment, file, reading, dryRun)
    },
    onMutate: () => setStarted(null),
    onSuccess: setStarted,
  })
  const stop = useMutation({ mutationFn: () => apiSend<Import>('POST', `${path}/stop`) })
  const ended = now !== null && now.state !== 'running' ? `${now.id} ${now.state} ${now.dry_run}` : null
  const { reload } = room
  useEffect(() => {
    if (ended === null) return
    // what was written belongs into the table, and the head counts it
    if (ended.endsWith('done false')) void reload()
    void refreshAmendment(client, amendment)
  }, [ended, reload, client, amendment])
  return { now, send, stop, error: send.error ?? stop.error ?? pollError, clear: () => { setStarted(null); send.reset() } }
}
export type ImportControl = ReturnType<typeof useImport>
