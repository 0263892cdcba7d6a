import type { AmendmentChange, AmendmentChangeDetail, LevelValues } from '@/openapi/schemas/change'
import { API_BASE, ApiError, apiGet, apiSend, KEEPALIVE_BYTES } from '../../_components/data/api'
import type { Values } from './change-state'
import type { Transport } from './saver'

export async function listChanges(amendment: string, signal?: AbortSignal): Promise<AmendmentChange[]> {
  const changes: AmendmentChange[] = []
  let cursor: string | null = null
  do {
    const answer: Awaited<ReturnType<typeof apiGet<AmendmentChange[]>>> = await apiGet<AmendmentChange[]>(`/amendments/${amendment}/changes`, { limit: 1000, cursor }, signal)
    changes.push(...answer.data)
    cursor = answer.page?.next_cursor ?? null
  } while (cursor !== null && changes.length < MOST_CHANGES)
  return changes
}
/** More changes than this are not edited cell by cell; the review and the API hold them all. */
export const MOST_CHANGES = 10_000

const random = (): string => (typeof crypto.randomUUID === 'function' ? crypto.randomUUID() : `${Date.now()}-${Math.random().toString(36).slice(2)}-${Math.random().toString(36).slice(2)}`)

/** The detail of a change is kept as a plain change: what follows from it is asked for where it is shown. */
function plain(detail: AmendmentChangeDetail): AmendmentChange {
  const change: AmendmentChange & { consequences?: unknown } = { ...detail }
  delete change.consequences
  return change
}

export function apiTransport(amendment: string): Transport {
  const changes = `/amendments/${amendment}/changes`
  const outlive = { outlive: true }
  return {
    create: async (item, key) => plain((await apiSend<AmendmentChangeDetail>('POST', changes, item, { 'idempotency-key': key }, outlive)).data),
    replace: async (change, etag, item) => plain((await apiSend<AmendmentChangeDetail>('PUT', `${changes}/${change}`, item, { 'if-match': etag }, outlive)).data),
    remove: async (change, etag) => void (await apiSend<null>('DELETE', `${changes}/${change}`, undefined, { 'if-match': etag }, outlive)),
    batch: async (items, remove, key) => (await apiSend<{ changes: AmendmentChange[] }>('POST', `${changes}/batch`, { changes: items, remove }, { 'idempotency-key': key }, outlive)).data.changes,
    read: async (change) => {
      try {
        return plain((await apiGet<AmendmentChangeDetail>(`${changes}/${change}`)).data)
      } catch (error) {
        if (error instanceof ApiError && error.problem.status === 404) return null
        throw error
      }
    },
    list: () => listChanges(amendment),
    values: async (level) => {
      const { values, revision } = (await apiGet<{ values: LevelValues; revision: number }>(`/levels/${level}/values`)).data
      return { values: values as Values, revision }
    },
    farewell: (items, remove) => {
      const send = (method: string, path: string, body?: unknown, headers: Record<string, string> = {}) =>
        void fetch(`${API_BASE}${path}`, {
          method, keepalive: true, credentials: 'same-origin', headers: { accept: 'application/json', ...(body === undefined ? {} : { 'content-type': 'application/json' }), ...headers },
          ...(body === undefined ? {} : { body: JSON.stringify(body) }),
        }).catch(() => undefined)
      if (items.length === 0) for (const { change, etag } of remove) send('DELETE', `${changes}/${change}`, undefined, { 'if-match': etag })
      else {
        // the rows that fit: bytes are counted, since letters may take several. The others are kept in the browser.
        let room = KEEPALIVE_BYTES - 200
        const leaving = remove.filter(() => (room -= 160) > 0)
        const fitting = items.filter((item) => {
          const size = new Blob([JSON.stringify(item)]).size + 1
          if (size < room) room -= size
          else return false
          return true
        })
        send('POST', `${changes}/batch`, { changes: fitting, remove: leaving })
      }
    },
    newKey: random,
  }
}
