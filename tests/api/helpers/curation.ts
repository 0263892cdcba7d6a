import { afterAll, expect } from 'vitest'
import { ask, get, type Json, type Reply, type Sending } from './client'
import { makeKey, type MadeKey } from './people'

/** An amendment of a curator's own, with what tests ask of it again and again. */
export interface Curated {
  at: string
  id: string
  by: MadeKey
  /** The amendment as it is now. */
  now: () => Promise<Json>
  add: (body: unknown, sending?: Sending) => Promise<Reply>
  /** A step with the tag of now. */
  step: (name: 'submit' | 'return' | 'accept' | 'withdraw', key: string, comment?: string) => Promise<Reply>
}

const begun: Curated[] = []
// What is accepted would go into the next edition: no other test of this table, whose requests are made from the document, may find it.
afterAll(async () => {
  for (const one of begun.splice(0)) if ((await one.now())?.state === 'accepted') await one.step('withdraw', one.by.key)
})

export async function begin(by?: MadeKey, title = 'test'): Promise<Curated> {
  const owner = by ?? (await makeKey('curator'))
  const made = await ask('post', '/amendments', { key: owner.key, body: { title } })
  expect(made.status).toBe(201)
  const { id } = made.json.data
  const at = `/amendments/${id}`
  const now = async () => (await get(at, { key: owner.key })).json.data
  const curated: Curated = {
    at, id, by: owner, now,
    add: (body, sending = {}) => ask('post', `${at}/changes`, { key: owner.key, ...sending, body }),
    step: async (name, key, comment) => ask('post', `${at}/${name}`, { key, headers: { 'if-match': (await now()).etag }, body: comment === undefined ? {} : { comment } }),
  }
  begun.push(curated)
  return curated
}

/** The values of a level of the newest edition, as a curator would send them back. */
export async function valuesOf(level: string): Promise<Json> {
  const reply = await get(`/levels/${level}/values`)
  expect(reply.status).toBe(200)
  return reply.json.data.values
}

/** A replace of a level with some values changed. */
export const replace = async (level: string, changed: Record<string, unknown>, more: Record<string, unknown> = {}): Promise<Json> => ({ action: 'replace', level, values: { ...(await valuesOf(level)), ...changed }, ...more })

export const codesOf = (change: Json): string[] => change.findings.map((one: { severity: string; code: string }) => `${one.severity} ${one.code}`).sort()
