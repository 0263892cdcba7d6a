import { ask, get, type Reply } from './client'

export interface Upload { mapping?: unknown; defaults?: unknown; encoding?: string; delimiter?: string; decimal?: string }

/** A multipart body of a file and the fields beside it. */
export function formOf(file: string | Buffer, fields: Record<string, string> = {}, name = 'levels.csv'): { raw: Buffer; headers: Record<string, string> } {
  const boundary = `lodeterm-${Math.random().toString(36).slice(2)}`
  const parts = Object.entries(fields).map(([key, value]) => Buffer.from(`--${boundary}\r\nContent-Disposition: form-data; name="${key}"\r\n\r\n${value}\r\n`))
  const head = Buffer.from(`--${boundary}\r\nContent-Disposition: form-data; name="file"; filename="${name}"\r\nContent-Type: text/csv\r\n\r\n`)
  return { raw: Buffer.concat([...parts, head, Buffer.from(file), Buffer.from(`\r\n--${boundary}--\r\n`)]), headers: { 'content-type': `multipart/form-data; boundary=${boundary}` } }
}

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
