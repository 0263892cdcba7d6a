import type { Browser, Request } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { openBrowser } from '../browser/browser'
import { type Instance, startInstance } from '../support/instance'
import { begun, cell, type Curator, curators, isSaved, openTable, storedOf } from './curators'

/** Pages that are closed while a save is under way: it is held up on purpose, so that the race is certain. All digits are invented. */
let instance: Instance
let browser: Browser
let author: Curator
let id = ''
beforeAll(async () => {
  instance = await startInstance('closing')
  browser = await openBrowser()
  author = await curators(instance, browser)('curator')
  id = await begun(author, 'Closed in the middle')
})
afterAll(async () => {
  await browser?.close()
  await instance?.end()
})

/** A request of a page, to be sent in its place. */
const sent = (request: Request, { signed }: Curator) => {
  const [match, key] = [request.headers()['if-match'], request.headers()['idempotency-key']]
  return { ...signed, body: request.postDataJSON() as unknown, headers: { ...signed.headers, ...(match ? { 'if-match': match } : {}), ...(key ? { 'idempotency-key': key } : {}) } }
}

describe('a tab that is closed in the middle of a save loses nothing', () => {
  it.each([
    { level: 'Na-I.6', when: 'its first save has arrived and is not answered', first: '', arrives: 'before' },
    { level: 'Na-I.7', when: 'a later save has arrived and is not answered', first: 'at first, ', arrives: 'before' },
    { level: 'Na-I.8', when: 'a later save is still on its way', first: 'at first, ', arrives: 'after' },
    { level: 'Na-I.9', when: 'its first save is still on its way', first: '', arrives: 'after' },
  ])('$when', async ({ level, first, arrives }) => {
    const page = await author.context.newPage()
    await openTable(page, id)
    await (await cell(page, level, 'Note')).dblclick()
    const noted = async () => (await storedOf(author, id, level))?.values.note
    if (first !== '') {
      await page.keyboard.insertText(first)
      await expect.poll(noted).toBe(first)
      await isSaved(page)
    }
    // the save as it leaves the page; what the browser sends for a page that is gone is not held
    const held = new Promise<Request>((caught) => {
      void page.route(/\/changes(\/[0-9a-f-]{36})?$/, async (route) => {
        if (!['POST', 'PUT'].includes(route.request().method())) return route.fallback()
        if (arrives === 'before') await instance.ask(route.request().method().toLowerCase(), new URL(route.request().url()).pathname.replace('/api/v1', ''), sent(route.request(), author))
        caught(route.request())
      })
    })
    await page.keyboard.insertText('held')
    const save = await held
    if (arrives === 'before') expect(await noted()).toBe(`${first}held`)
    await page.keyboard.insertText(' up')
    await page.close({ runBeforeUnload: true })
    await expect.poll(noted, { timeout: 10_000 }).toBe(`${first}held up`)
    if (arrives === 'before') return
    // the earlier text comes at last: it is stale, and overwrites nothing. It comes under a key of its own, since a browser may let go of a
    // request that it held when its page is gone, and the same key would then be told the answer to that
    const again = sent(save, author)
    const late = await instance.ask(save.method().toLowerCase(), new URL(save.url()).pathname.replace('/api/v1', ''), { ...again, headers: { ...again.headers, 'idempotency-key': `late-${level}` } })
    expect(late.status).toBe(first === '' ? 409 : 412)
    expect(await noted()).toBe(`${first}held up`)
  })
})

describe('what goes after a request without an answer', () => {
  const VALUES = { configuration: '3d', coupling: 'LS', term: '2D3/2' }
  const change = (note: string) => ({ action: 'replace', level: 'Na-I.5', values: { ...VALUES, note } })
  const unanswered = (note: string) => ({ action: 'replace', values: { ...VALUES, note } })
  const batch = (who: Curator, item: object) => instance.ask('post', `/amendments/${id}/changes/batch`, { ...who.signed, body: { changes: [item] } })

  it('goes upon what this account sent, and upon nothing else', async () => {
    const other = await curators(instance, browser)('second.curator')
    const made = (await instance.ask('post', `/amendments/${id}/changes`, { ...author.signed, body: change('a') })).json.data
    // somebody else's text, or another text than was sent
    expect((await batch(other, { ...change('x'), unanswered: unanswered('a') })).status).toBe(409)
    expect((await batch(author, { ...change('x'), unanswered: unanswered('other') })).status).toBe(409)
    const second = await batch(author, { ...change('b'), unanswered: unanswered('a') })
    expect(second.json.data.changes[0]).toMatchObject({ id: made.id, version: 2, values: { note: 'b' } })
    // once there is a second version the first is not what stands there
    expect((await batch(author, { ...change('x'), unanswered: unanswered('b') })).status).toBe(409)
    const upon = { change: made.id, etag: made.etag }
    expect((await batch(other, { ...change('x'), ...upon, unanswered: unanswered('b') })).status).toBe(412)
    const third = (await batch(author, { ...change('c'), ...upon, unanswered: unanswered('b') })).json.data.changes[0]
    expect(third).toMatchObject({ version: 3, values: { note: 'c' } })
    // two versions later it is too late, even with the right text
    expect((await batch(author, { ...change('x'), ...upon, unanswered: unanswered('c') })).status).toBe(412)
    // of two on one entity tag one is written
    const both = await Promise.all([batch(author, { ...change('d'), change: made.id, etag: third.etag, unanswered: unanswered('d') }), batch(other, { ...change('e'), change: made.id, etag: third.etag, unanswered: unanswered('d') })])
    expect(both.map((reply) => reply.status).sort()).toEqual([200, 412])
    await other.context.close()
  })

  it('makes no new level twice: it is found by what was sent of it, or nothing is written', async () => {
    const level = (note: string) => ({ action: 'create', species: 'Na-I', values: { ...VALUES, note } })
    const sentBefore = (note: string) => ({ action: 'create', values: { ...VALUES, note } })
    expect((await batch(author, { ...level('ab'), unanswered: sentBefore('a') })).status).toBe(412)
    const made = (await instance.ask('post', `/amendments/${id}/changes`, { ...author.signed, body: level('a') })).json.data
    expect((await batch(author, { ...level('ab'), unanswered: sentBefore('a') })).json.data.changes[0]).toMatchObject({ id: made.id, subject: made.subject, values: { note: 'ab' } })
  })
})
