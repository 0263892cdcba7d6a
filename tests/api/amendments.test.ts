import { describe, expect, it } from 'vitest'
import { ask, get, type Json } from './helpers/client'
import { makeKey } from './helpers/people'

describe('drafts', () => {
  it('refuses a reader at the curator\'s door', async () => {
    const { key } = await makeKey('reader')
    const reply = await ask('post', '/amendments', { key, body: { title: 'mine' } })
    expect([reply.status, reply.json.code]).toEqual([403, 'role_insufficient'])
    expect(reply.json.detail).toContain('curator')
  })

  it('begins, reads, changes and lists a draft', async () => {
    const { key, owner } = await makeKey('curator')
    const made = await ask('post', '/amendments', { key, body: { title: '  Zn I energies ', note: 'from the comb work' } })
    expect(made.status).toBe(201)
    expect(made.json.data).toMatchObject({ title: 'Zn I energies', note: 'from the comb work', state: 'draft', version: 1, author: { id: owner.id } })
    const at = `/amendments/${made.json.data?.id}`
    expect(made.headers.location).toMatch(new RegExp(`${at}$`))
    const read = await get(at, { key })
    expect(read.headers.etag).toBe(made.headers.etag)
    const tag = read.headers.etag ?? ''
    const changed = await ask('patch', at, { key, headers: { 'if-match': tag }, body: { note: 'checked' } })
    expect(changed.json.data).toMatchObject({ title: 'Zn I energies', note: 'checked', version: 2 })
    const stale = await ask('patch', at, { key, headers: { 'if-match': tag }, body: { note: 'lost?' } })
    expect([stale.status, stale.json.code]).toEqual([412, 'etag_stale'])
    expect((await ask('patch', at, { key, body: { note: 'x' } })).status).toBe(428)
    expect((await get(at, { key })).json.data).toMatchObject({ note: 'checked', version: 2 })
    expect((await get('/amendments?state=draft&limit=1000', { key })).json.data?.map((one: Json) => one.id)).toContain(made.json.data?.id)
  })

  it('lets one of two curators win on one tag', async () => {
    const { key } = await makeKey('curator')
    const made = await ask('post', '/amendments', { key, body: { title: 'raced' } })
    const headers = { 'if-match': made.headers.etag ?? '' }
    const replies = await Promise.all(['a', 'b', 'c'].map((note) => ask('patch', `/amendments/${made.json.data?.id}`, { key, headers, body: { note } })))
    expect(replies.map((reply) => reply.status).sort()).toEqual([200, 412, 412])
  })

  it('lets only the author or an admin change it, and tells a stranger nothing of its version', async () => {
    const [author, colleague, admin, reader] = [await makeKey('curator'), await makeKey('curator'), await makeKey('admin'), await makeKey('reader')]
    const made = await ask('post', '/amendments', { key: author.key, body: { title: 'mine' } })
    const at = `/amendments/${made.json.data?.id}`
    const headers = { 'if-match': made.headers.etag ?? '' }
    const refused = await ask('patch', at, { key: colleague.key, headers: { 'if-match': '"stale"' }, body: { note: 'x' } })
    expect([refused.status, refused.json.code]).toEqual([403, 'not_the_author'])
    expect((await ask('patch', at, { headers: { 'if-match': '"stale"' }, body: { note: 'x' } })).status).toBe(401)
    expect((await ask('patch', at, { key: reader.key, headers: { 'if-match': '"stale"' }, body: { note: 'x' } })).status).toBe(403)
    expect((await ask('patch', at, { key: admin.key, headers, body: { note: 'by an admin' } })).status).toBe(200)
  })

  it('answers 404 for one that does not exist and 400 for what is no identifier', async () => {
    const { key } = await makeKey('curator')
    expect((await get('/amendments/00000000-0000-4000-8000-000000000000', { key })).status).toBe(404)
    const reply = await get('/amendments/7', { key })
    expect([reply.status, reply.json.code]).toEqual([400, 'identifier_malformed'])
  })
})
