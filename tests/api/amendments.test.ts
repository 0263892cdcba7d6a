import { randomUUID } from 'node:crypto'
import { eq, sql } from 'drizzle-orm'
import { describe, expect, it } from 'vitest'
import { getDb } from '@/db/client'
import { amendmentChanges, noticeEvents } from '@/db/schema'
import { ask, faultsOf, get, type Json } from './helpers/client'
import { begin, codesOf, replace, valuesOf } from './helpers/curation'
import { makeKey, makePerson, SAME_SITE, signIn } from './helpers/people'

const NONE = '00000000-0000-4000-8000-000000000000'

describe('an amendment', () => {
  it('is refused to a reader', async () => {
    const { key } = await makeKey('reader')
    const reply = await ask('post', '/amendments', { key, body: { title: 'mine' } })
    expect([reply.status, reply.json.code]).toEqual([403, 'role_insufficient'])
    expect(reply.json.detail).toContain('curator')
  })

  it('begins, is read, changed and listed', async () => {
    const { key, owner } = await makeKey('curator')
    const made = await ask('post', '/amendments', { key, body: { title: '  Zn I energies ', note: 'from the comb work' } })
    expect(made.status).toBe(201)
    expect(made.json.data).toMatchObject({ title: 'Zn I energies', note: 'from the comb work', state: 'draft', version: 1, author: { id: owner.id }, authors: [{ id: owner.id }], review: null, reviews: [], published_in: null })
    expect(made.json.data.counts).toEqual({ changes: 0, errors: 0, warnings: 0, uncommented: 0, open_comments: 0 })
    expect(made.json.data.possible).toMatchObject({ edit: { allowed: true }, submit: { allowed: false }, accept: { allowed: false }, withdraw: { allowed: true } })
    const at = `/amendments/${made.json.data.id}`
    expect(made.headers.location).toMatch(new RegExp(`${at}$`))
    const read = await get(at, { key })
    expect(read.headers.etag).toBe(made.headers.etag)
    expect(read.json.data.etag).toBe(read.headers.etag)
    const tag = read.headers.etag ?? ''
    const changed = await ask('patch', at, { key, headers: { 'if-match': tag }, body: { note: 'checked' } })
    expect(changed.json.data).toMatchObject({ title: 'Zn I energies', note: 'checked', version: 2 })
    const same = await ask('patch', at, { key, headers: { 'if-match': changed.headers.etag ?? '' }, body: { note: 'checked' } })
    expect([same.status, same.headers.etag], 'the same again is no edit').toEqual([200, changed.headers.etag])
    const stale = await ask('patch', at, { key, headers: { 'if-match': tag }, body: { note: 'lost?' } })
    expect([stale.status, stale.json.code]).toEqual([412, 'etag_stale'])
    expect(stale.json.current).toMatchObject({ id: made.json.data.id, note: 'checked', version: 2 })
    expect((await ask('patch', at, { key, body: { note: 'x' } })).status).toBe(428)
    expect((await get('/amendments?state=draft&limit=1000', { key })).json.data.map((one: Json) => one.id)).toContain(made.json.data.id)
  })

  it('lets one of several win on one tag', async () => {
    const one = await begin()
    const headers = { 'if-match': (await one.now()).etag }
    const replies = await Promise.all(['a', 'b', 'c'].map((note) => ask('patch', one.at, { key: one.by.key, headers, body: { note } })))
    expect(replies.map((reply) => reply.status).sort()).toEqual([200, 412, 412])
  })

  it('can be edited by any curator and by nobody else', async () => {
    const [one, colleague, reader] = [await begin(), await makeKey('curator'), await makeKey('reader')]
    const headers = { 'if-match': (await one.now()).etag }
    expect((await ask('patch', one.at, { headers, body: { note: 'x' } })).status).toBe(401)
    expect((await ask('patch', one.at, { key: reader.key, headers, body: { note: 'x' } })).status).toBe(403)
    expect((await ask('patch', one.at, { key: colleague.key, headers, body: { note: 'by a colleague' } })).status).toBe(200)
  })

  it('answers 404 for what does not exist and 400 for what is no identifier', async () => {
    const one = await begin()
    const { key } = one.by
    for (const at of ['', '/changes', '/consequences', '/comments', `/changes/${NONE}`]) expect((await get(`/amendments/${NONE}${at}`, { key })).status, at).toBe(404)
    expect((await get(`${one.at}/changes/${NONE}`, { key })).json.code).toBe('change_unknown')
    const reply = await get('/amendments/7', { key })
    expect([reply.status, reply.json.code]).toEqual([400, 'identifier_malformed'])
  })
})

describe('the way of an amendment', () => {
  it('goes from draft by review to accepted, with what each may do', async () => {
    const [one, colleague] = [await begin(undefined, 'Sodium D'), await makeKey('curator')]
    expect((await one.step('submit', one.by.key)).json.code).toBe('nothing_to_review')
    expect((await one.add(await replace('Na-I.3', { note: 'looked at again' }))).status).toBe(201)
    const early = await one.step('accept', colleague.key)
    expect([early.status, early.json.code, early.json.possible_states]).toEqual([409, 'state_conflict', ['in_review']])
    const asked = await one.step('submit', one.by.key, 'please look')
    expect(asked.status, asked.text).toBe(200)
    expect(asked.json.data).toMatchObject({ state: 'in_review', review: { comment: 'please look', outcome: null, asked_by: { id: one.by.owner.id } } })
    expect(asked.json.data.review.version).toBe(asked.json.data.version)
    expect(asked.json.data.possible).toMatchObject({ accept: { allowed: false }, submit: { allowed: false } })
    expect((await get(one.at, { key: colleague.key })).json.data.possible.accept.allowed).toBe(true)
    const own = await one.step('accept', one.by.key)
    expect([own.status, own.json.code]).toEqual([403, 'own_amendment'])
    const silent = await one.step('return', colleague.key)
    expect([silent.status, silent.json.code]).toEqual([422, 'comment_missing'])
    const back = await one.step('return', colleague.key, 'Which table?')
    expect(back.json.data).toMatchObject({ state: 'draft', review: { outcome: 'returned', closing_comment: 'Which table?', closed_by: { id: colleague.owner.id } } })
    await one.step('submit', one.by.key)
    const done = await one.step('accept', colleague.key)
    expect(done.json.data).toMatchObject({ state: 'accepted', review: { outcome: 'accepted' } })
    expect(done.json.data.reviews).toHaveLength(2)
    expect((await one.step('return', colleague.key, 'x')).json.code).toBe('state_conflict')
    await one.step('withdraw', one.by.key)
  })

  it('keeps an author from accepting under any key or role, and a colleague who edited a change too', async () => {
    const [person, editor] = [await makePerson('admin'), await makeKey('curator')]
    const one = await begin(await makeKey('curator', { owner: person }))
    const change = await one.add(await replace('Na-I.3', { note: 'a' }))
    await ask('put', `${one.at}/changes/${change.json.data.id}`, { key: editor.key, headers: { 'if-match': change.headers.etag ?? '' }, body: await replace('Na-I.3', { note: 'b' }) })
    expect((await one.now()).authors.map((author: Json) => author.id).sort()).toEqual([person.id, editor.owner.id].sort())
    await one.step('submit', one.by.key)
    const admin = await makeKey('admin', { owner: person })
    expect((await one.step('accept', admin.key)).json.code).toBe('own_amendment')
    expect((await one.step('accept', editor.key)).json.code).toBe('own_amendment')
    const { etag } = await one.now()
    const inBrowser = await ask('post', `${one.at}/accept`, { cookie: await signIn(person), headers: { ...SAME_SITE, 'if-match': etag }, body: {} })
    expect([inBrowser.status, inBrowser.json.code]).toEqual([403, 'own_amendment'])
    expect((await one.step('accept', (await makeKey('admin')).key)).status).toBe(200)
    await one.step('withdraw', admin.key)
  })

  it('is a draft again after any edit, its review void', async () => {
    const [one, colleague] = [await begin(), await makeKey('curator')]
    const change = await one.add(await replace('Na-I.3', { note: 'a' }))
    await one.step('submit', one.by.key)
    const reviewed = (await one.now()).etag
    await ask('put', `${one.at}/changes/${change.json.data.id}`, { key: one.by.key, headers: { 'if-match': change.headers.etag ?? '' }, body: await replace('Na-I.3', { note: 'c' }) })
    expect(await one.now()).toMatchObject({ state: 'draft', review: { outcome: 'edited' } })
    const late = await ask('post', `${one.at}/accept`, { key: colleague.key, headers: { 'if-match': reviewed }, body: {} })
    expect([late.status, late.json.current.state]).toEqual([412, 'draft'])
    await one.step('submit', one.by.key)
    await one.step('accept', colleague.key, 'seen')
    const titled = await ask('patch', one.at, { key: colleague.key, headers: { 'if-match': (await one.now()).etag }, body: { title: 'better' } })
    expect(titled.json.data).toMatchObject({ state: 'draft', title: 'better' })
    // who accepted what stays on record; that it no longer holds is told beside
    expect(titled.json.data.review).toMatchObject({ outcome: 'accepted', closed_by: { id: colleague.owner.id }, closing_comment: 'seen', voided: { by: { id: colleague.owner.id } } })
    expect(titled.json.data.reviews.map((review: Json) => [review.outcome, review.voided === null])).toEqual([['edited', true], ['accepted', false]])
    expect(titled.json.data.possible.submit.allowed).toBe(true)
  })

  it('takes a step once under one Idempotency-Key', async () => {
    const one = await begin()
    await one.add(await replace('Na-I.3', { note: 'a' }))
    const headers = { 'if-match': (await one.now()).etag, 'idempotency-key': randomUUID() }
    const ways = [1, 2].map(() => ask('post', `${one.at}/submit`, { key: one.by.key, headers, body: { comment: 'once' } }))
    const [first] = await Promise.all(ways)
    const again = await ask('post', `${one.at}/submit`, { key: one.by.key, headers, body: { comment: 'once' } })
    expect([again.status, again.headers['idempotency-replayed'], first === undefined]).toEqual([200, 'true', false])
    expect((await one.now()).reviews).toHaveLength(1)
  })

  it('lets one of two reviewers win', async () => {
    const [one, a, b] = [await begin(), await makeKey('curator'), await makeKey('curator')]
    await one.add(await replace('Na-I.3', { note: 'a' }))
    const asked = await one.step('submit', one.by.key)
    const headers = { 'if-match': asked.json.data.etag }
    const replies = await Promise.all([ask('post', `${one.at}/accept`, { key: a.key, headers, body: {} }), ask('post', `${one.at}/return`, { key: b.key, headers, body: { comment: 'no' } })])
    expect(replies.map((reply) => reply.status).sort()).toEqual([200, 412])
    expect((await ask('post', `${one.at}/accept`, { key: a.key, body: {} })).status).toBe(428)
  })

  it('ends by withdrawal, by its author or an admin, and then stays', async () => {
    const [one, colleague, admin] = [await begin(), await makeKey('curator'), await makeKey('admin')]
    const change = await one.add(await replace('Na-I.3', { note: 'a' }))
    const refused = await one.step('withdraw', colleague.key)
    expect([refused.status, refused.json.code]).toEqual([403, 'not_the_author'])
    await one.step('submit', one.by.key)
    expect((await one.step('withdraw', admin.key, 'no longer wanted')).json.data).toMatchObject({ state: 'withdrawn', review: { outcome: 'withdrawn' }, possible: { edit: { allowed: false } } })
    for (const reply of [
      await one.add(await replace('Na-I.4', { note: 'x' })),
      await ask('delete', `${one.at}/changes/${change.json.data.id}`, { key: one.by.key, headers: { 'if-match': change.headers.etag ?? '' } }),
      await one.step('submit', one.by.key), await one.step('withdraw', admin.key),
      await ask('patch', one.at, { key: one.by.key, headers: { 'if-match': (await one.now()).etag }, body: { note: 'x' } }),
    ]) expect([reply.status, reply.json.code], reply.text).toEqual([409, 'state_conflict'])
  })

  it('is kept from review by errors, and by warnings without a word', async () => {
    const one = await begin()
    const wrong = await one.add(await replace('Na-I.3', { term: '2P3/2' }))
    expect(wrong.status).toBe(201)
    expect(codesOf(wrong.json.data)).toContain('error parity_mismatch')
    const blocked = await one.step('submit', one.by.key, 'please')
    expect([blocked.status, blocked.json.code]).toEqual([422, 'changes_have_errors'])
    expect(blocked.json.changes[0]).toMatchObject({ change: wrong.json.data.id, subject: 'Na-I.3' })
    const at = `${one.at}/changes/${wrong.json.data.id}`
    const moved = await ask('put', at, { key: one.by.key, headers: { 'if-match': wrong.headers.etag ?? '' }, body: await replace('Na-I.3', { energy_invcm: 16973.5, energy_literal: null }) })
    expect(codesOf(moved.json.data)).toContain('warning energy_moved')
    expect((await one.now()).counts).toMatchObject({ changes: 1, errors: 0, warnings: 1, uncommented: 1 })
    const silent = await one.step('submit', one.by.key)
    expect([silent.status, silent.json.code, faultsOf(silent)]).toEqual([422, 'warnings_uncommented', ['/comment warnings_uncommented']])
    expect((await ask('put', at, { key: one.by.key, headers: { 'if-match': moved.headers.etag ?? '' }, body: { ...(await replace('Na-I.3', { energy_invcm: 16973.5, energy_literal: null })), comment: 'new measurement' } })).json.data.version).toBe(3)
    expect((await one.step('submit', one.by.key)).status).toBe(200)
  })
})

describe('talk and tasks', () => {
  it('keeps threads, about the whole or one change', async () => {
    const [one, colleague] = [await begin(), await makeKey('curator')]
    const change = await one.add(await replace('Na-I.3', { note: 'a' }))
    const first = await ask('post', `${one.at}/comments`, { key: colleague.key, body: { text: ' Where from? ', change: change.json.data.id } })
    expect(first.json.data).toMatchObject({ text: 'Where from?', change: change.json.data.id, thread: null, resolved_at: null })
    const answer = await ask('post', `${one.at}/comments`, { key: one.by.key, body: { text: 'The table.', thread: first.json.data.id } })
    expect(answer.json.data).toMatchObject({ thread: first.json.data.id, change: change.json.data.id })
    expect((await one.now()).counts.open_comments).toBe(1)
    expect((await get('/me/tasks', { key: one.by.key })).json.data).toMatchObject({ open_threads: 1, complete: true })
    const resolved = await ask('patch', `${one.at}/comments/${first.json.data.id}`, { key: one.by.key, headers: { 'if-match': first.json.data.etag }, body: { resolved: true } })
    expect(first.headers.etag).toBe(first.json.data.etag)
    expect([resolved.json.data.version, resolved.headers.etag === first.headers.etag]).toEqual([2, false])
    const late = await ask('patch', `${one.at}/comments/${first.json.data.id}`, { key: colleague.key, headers: { 'if-match': first.json.data.etag }, body: { resolved: false } })
    expect([late.status, late.json.current.resolved_by.id]).toEqual([412, one.by.owner.id])
    expect((await ask('patch', `${one.at}/comments/${first.json.data.id}`, { key: colleague.key, body: { resolved: false } })).status).toBe(428)
    expect(resolved.json.data.resolved_by.id).toBe(one.by.owner.id)
    expect((await ask('patch', `${one.at}/comments/${answer.json.data.id}`, { key: one.by.key, headers: { 'if-match': answer.json.data.etag }, body: { resolved: true } })).json.code).toBe('thread_malformed')
    expect((await ask('post', `${one.at}/comments`, { key: one.by.key, body: { text: 'x', thread: answer.json.data.id } })).json.code).toBe('thread_malformed')
    expect((await ask('post', `${one.at}/comments`, { key: one.by.key, body: { text: 'x', change: NONE } })).json.code).toBe('change_unknown')
    expect((await one.now()).counts.open_comments).toBe(0)
    const page = await get(`${one.at}/comments?limit=1`, { key: one.by.key })
    expect(page.json.data.map((row: Json) => row.id)).toEqual([first.json.data.id])
    expect((await get(`${one.at}/comments?limit=1&cursor=${encodeURIComponent(page.json.page.next_cursor)}`, { key: one.by.key })).json.data.map((row: Json) => row.id)).toEqual([answer.json.data.id])
    // what was said stays when the change goes
    await ask('delete', `${one.at}/changes/${change.json.data.id}`, { key: one.by.key, headers: { 'if-match': change.headers.etag ?? '' } })
    expect((await get(`${one.at}/comments`, { key: one.by.key })).json.data[0]).toMatchObject({ change: null, text: 'Where from?' })
  })

  it('tells what waits for whom', async () => {
    const [one, colleague] = [await begin(), await makeKey('curator')]
    const lists = async (key: string) => {
      const { data } = (await get('/me/tasks', { key })).json
      return ['drafts', 'returned', 'in_review', 'to_review', 'accepted'].filter((name) => data[name].some((amendment: Json) => amendment.id === one.id))
    }
    expect(await lists(one.by.key)).toEqual(['drafts'])
    await one.add(await replace('Na-I.3', { note: 'a' }))
    await one.step('submit', one.by.key)
    expect([await lists(one.by.key), await lists(colleague.key)]).toEqual([['in_review'], ['to_review']])
    await one.step('return', colleague.key, 'no')
    expect([await lists(one.by.key), await lists(colleague.key)]).toEqual([['returned'], []])
    await one.step('submit', one.by.key)
    await one.step('accept', colleague.key)
    expect([await lists(one.by.key), await lists(colleague.key)]).toEqual([['accepted'], ['accepted']])
    await one.step('withdraw', one.by.key)
  })

  it('leaves word for those who are to be told', async () => {
    const [one, colleague] = [await begin(undefined, 'told of'), await makeKey('curator')]
    await one.add(await replace('Na-I.3', { note: 'a' }))
    await one.step('submit', one.by.key, 'please')
    await one.step('return', colleague.key, 'why?')
    await one.step('submit', one.by.key)
    await one.step('accept', colleague.key)
    await one.step('withdraw', one.by.key)
    const events = await getDb().select().from(noticeEvents).where(sql`${noticeEvents.payload} ->> 'amendment' = ${one.id}`).orderBy(noticeEvents.id)
    expect(events.map((event) => [event.kind, (event.payload as Json).by.id, (event.payload as Json).comment])).toEqual([
      ['review.asked', one.by.owner.id, 'please'], ['review.returned', colleague.owner.id, 'why?'], ['review.asked', one.by.owner.id, null], ['review.accepted', colleague.owner.id, null],
    ])
    expect(events[0]?.payload).toMatchObject({ title: 'told of', by: { name: 'Test curator' } })
  })

  it('refuses a review of what an edition has changed since', async () => {
    const one = await begin()
    const change = await one.add(await replace('Na-I.3', { note: 'a' }))
    // as if it had been written from a revision that is not the newest
    await getDb().update(amendmentChanges).set({ baseRevision: 7 }).where(eq(amendmentChanges.id, change.json.data.id))
    expect(codesOf((await get(`${one.at}/changes/${change.json.data.id}`, { key: one.by.key })).json.data)).toEqual(['error base_stale'])
    const refused = await one.step('submit', one.by.key)
    const now = { subject: 'Na-I.3', base_revision: 7, current_revision: 1, edition: 1, amendment: null }
    expect([refused.status, refused.json.code, refused.json.changes]).toEqual([409, 'base_stale', [{ change: change.json.data.id, ...now }]])
    expect(refused.json.detail).toContain('Na-I.3 was made from revision 7, and now edition 1 made revision 1')
  })

  it('writes the audit of every step', async () => {
    const [one, admin] = [await begin(), await makeKey('admin')]
    const change = await one.add(await replace('Na-I.3', { note: 'a' }))
    await one.step('submit', one.by.key, 'go')
    await one.step('withdraw', one.by.key)
    const events = (await get(`/audit?subject_id=${one.id}&limit=100`, { key: admin.key })).json.data
    expect(events.map((event: Json) => event.action)).toEqual(['amendment.withdraw', 'amendment.submit', 'amendment.create'])
    expect(events[1]).toMatchObject({ before: { state: 'draft' }, after: { state: 'in_review', comment: 'go' }, key: one.by.id })
    expect((await get(`/audit?subject_id=${change.json.data.id}`, { key: admin.key })).json.data[0]).toMatchObject({ action: 'change.create', after: { amendment: one.id, subject: 'Na-I.3' } })
    // and under the level that it is about
    const ofLevel = (await get('/audit?subject_id=Na-I.3&limit=1000', { key: admin.key })).json.data as { subject: { id: string } }[]
    expect(ofLevel.map(({ subject }) => subject.id)).toContain(change.json.data.id)
    expect((await valuesOf('Na-I.3')).note).not.toBe('a')
  })
})
