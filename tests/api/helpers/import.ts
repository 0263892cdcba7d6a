import { ask, get, type Reply } from './client'
import { formOf } from './form'

export interface Upload { mapping?: unknown; defaults?: unknown; encoding?: string; delimiter?: string; decimal?: string }

export async function newAmendment(key: string, title = 'Import of a table'): Promise<string> {
  const reply = await ask('post', '/amendments', { key, body: { title } })
  if (reply.status !== 201) throw new Error(reply.text)
  return reply.json.data.id as string
}

const fieldsOf = ({ mapping, defaults, ...rest }: Upload): Record<string, string> => ({
  ...(mapping === undefined ? {} : { mapping: JSON.stringify(mapping) }), ...(defaults === undefined ? {} : { defaults: JSON.stringify(defaults) }), ...rest,
})

export const importFile = (key: string, amendment: string, file: string | Buffer, query = '', upload: Upload = {}): Promise<Reply> =>
  ask('post', `/amendments/${amendment}/import${query}`, { key, ...formOf(file, fieldsOf(upload)) })

export async function reportOf(key: string, amendment: string, id: string, verdict?: string) {
  const reply = await get(`/amendments/${amendment}/imports/${id}/rows?limit=1000${verdict === undefined ? '' : `&verdict=${verdict}`}`, { key })
  return reply.json.data as { row: number; verdict: string; level: string | null; findings: { severity: string; code: string; field: string | null; detail: string }[]; fields: { field: string; before: unknown; after: unknown }[] }[]
}
