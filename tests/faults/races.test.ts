import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { type Instance, startInstance } from '../support/instance'
import { addChanges, bringThrough, newAmendment, notedAgain, type Signed, wait, wholeEditions, withTag } from './workbench'

let instance: Instance
let author: Signed
let reviewer: Signed
let admin: Signed

beforeAll(async () => {
  instance = await startInstance('races')
  ;[author, reviewer, admin] = await Promise.all(['curator', 'second.curator', 'admin'].map(instance.signIn)) as [Signed, Signed, Signed]
})
afterAll(() => instance.end())

const statuses = (replies: { status: number }[]) => replies.map(({ status }) => status).sort()

describe('two curators on one entity tag', () => {
  it('one changes the level, the other is told what is there now', async () => {
    const amendment = await newAmendment(instance, author, 'Two at once')
    const [change] = await notedAgain(instance, ['Na-I.3'], 'first')
    const made = await instance.ask('post', `/amendments/${amendment}/changes`, { ...author, body: change })
    expect(made.status, made.text).toBe(201)
    const { id, etag } = made.json.data as { id: string; etag: string }
    for (let round = 0; round < 5; round += 1) {
      const tag = ((await instance.get(`/amendments/${amendment}/changes/${id}`, author)).json.data as { etag: string }).etag
      const mine = (note: string) => ({ ...(change as { values: object }), values: { ...(change as { values: object }).values, note } })
      const both = await Promise.all([
        instance.ask('put', `/amendments/${amendment}/changes/${id}`, { ...withTag(author, tag), body: mine(`author ${round}`) }),
        instance.ask('put', `/amendments/${amendment}/changes/${id}`, { ...withTag(reviewer, tag), body: mine(`reviewer ${round}`) }),
      ])
      expect(statuses(both)).toEqual([200, 412])
      const won = both.find(({ status }) => status === 200)?.json.data
      const lost = both.find(({ status }) => status === 412)?.json
      expect(lost.code).toBe('etag_stale')
      expect(lost.current.values).toEqual(won.values)
      expect((await instance.get(`/amendments/${amendment}/changes/${id}`, author)).json.data.values).toEqual(won.values)
    }
    const stale = await instance.ask('delete', `/amendments/${amendment}/changes/${id}`, withTag(author, etag))
    expect(stale.status).toBe(412)
  })

  it('one accepts, the other returns: one of them is heard', async () => {
    for (let round = 0; round < 4; round += 1) {
      const amendment = await newAmendment(instance, author, `Accept or return ${round}`)
      await addChanges(instance, author, amendment, await notedAgain(instance, ['Na-I.4'], `round ${round}`))
      const submit = await instance.ask('post', `/amendments/${amendment}/submit`, { ...withTag(author, (await instance.get(`/amendments/${amendment}`, author)).json.data.etag), body: { comment: 'please' } })
      expect(submit.status, submit.text).toBe(200)
      const tag = submit.json.data.etag as string
      const both = await Promise.all([
        instance.ask('post', `/amendments/${amendment}/accept`, { ...withTag(reviewer, tag), body: {} }),
        instance.ask('post', `/amendments/${amendment}/return`, { ...withTag(admin, tag), body: { comment: 'not yet' } }),
      ])
      expect(statuses(both)).toEqual([200, 412])
      const { state, reviews } = (await instance.get(`/amendments/${amendment}`, author)).json.data
      expect([['accepted', 'accepted'], ['draft', 'returned']]).toContainEqual([state, reviews.at(-1).outcome])
      const away = await instance.ask('post', `/amendments/${amendment}/withdraw`, { ...withTag(author, (await instance.get(`/amendments/${amendment}`, author)).json.data.etag), body: {} })
      expect(away.status, away.text).toBe(200)
    }
  })
})

describe('publishing raced by an edit', () => {
  it('publishes the whole before it or the whole after it', async () => {
    let newest = await wholeEditions(instance)
    for (const delay of [0, 5, 15, 40, 90]) {
      const amendment = await newAmendment(instance, author, `Raced after ${delay} ms`)
      const levels = ((await instance.get('/levels?species=Fe-I&limit=100')).json.data as { id: string }[]).map(({ id }) => id)
      const changes = await notedAgain(instance, levels, `raced ${delay}`)
      await addChanges(instance, author, amendment, changes)
      await bringThrough(instance, author, reviewer, amendment)
      const [first] = (await instance.get(`/amendments/${amendment}/changes?limit=1`, author)).json.data as { id: string; etag: string; values: Record<string, unknown>; level: string }[]
      if (first === undefined) throw new Error('the amendment has no changes')
      const publishing = instance.ask('post', '/editions', { ...admin, body: { label: `Raced ${delay}` } })
      await wait(delay)
      const edit = await instance.ask('put', `/amendments/${amendment}/changes/${first.id}`, { ...withTag(author, first.etag), body: { action: 'replace', level: first.level, values: { ...first.values, note: 'edited late' } } })
      const published = await publishing
      const now = await wholeEditions(instance)
      const { state, published_in: edition } = (await instance.get(`/amendments/${amendment}`, author)).json.data
      if (published.status === 201) {
        expect(now).toBe(newest + 1)
        expect({ state, edition }).toEqual({ state: 'published', edition: now })
        expect(edit.status).toBe(409)
        const notes = ((await instance.get(`/levels?species=Fe-I&limit=100&edition=${now}`)).json.data as { note: string }[]).map(({ note }) => note)
        expect(new Set(notes)).toEqual(new Set([`raced ${delay}`]))
      } else {
        expect(published.status).toBe(409)
        expect(edit.status).toBe(200)
        expect(now).toBe(newest)
        expect(state).toBe('draft')
        const away = await instance.ask('post', `/amendments/${amendment}/withdraw`, { ...withTag(author, (await instance.get(`/amendments/${amendment}`, author)).json.data.etag), body: {} })
        expect(away.status, away.text).toBe(200)
      }
      newest = now
    }
  })

  it('makes one edition when two admins publish at once', async () => {
    const amendment = await newAmendment(instance, author, 'Published twice')
    await addChanges(instance, author, amendment, await notedAgain(instance, ['Zn-I.1', 'Zn-I.2'], 'twice'))
    await bringThrough(instance, author, reviewer, amendment)
    const before = await wholeEditions(instance)
    const both = await Promise.all([1, 2].map((n) => instance.ask('post', '/editions', { ...admin, body: { label: `Twice ${n}` } })))
    expect(statuses(both)).toEqual([201, 409])
    expect(await wholeEditions(instance)).toBe(before + 1)
  })
})

describe('one Idempotency-Key', () => {
  it('sent twice at once and once more has one effect', async () => {
    const ask = () => instance.ask('post', '/amendments', { cookie: author.cookie ?? '', headers: { ...author.headers, 'idempotency-key': 'the-same-key' }, body: { title: 'Only once' } })
    const replies = await Promise.all([ask(), ask()])
    replies.push(await ask())
    const made = replies.filter(({ status }) => status === 201)
    // the second may be told that the first still runs
    for (const { status, json } of replies) expect(status === 201 || json.code === 'idempotency_running').toBe(true)
    expect(made.length).toBeGreaterThanOrEqual(2)
    expect(new Set(made.map(({ json }) => json.data.id)).size).toBe(1)
    expect(await instance.query("select id from amendments where title = 'Only once'")).toHaveLength(1)
  })

  it('publishes one edition however often it is sent', async () => {
    const amendment = await newAmendment(instance, author, 'Published with a key')
    await addChanges(instance, author, amendment, await notedAgain(instance, ['Zn-I.1'], 'with a key'))
    await bringThrough(instance, author, reviewer, amendment)
    const before = await wholeEditions(instance)
    const ask = () => instance.ask('post', '/editions', { cookie: admin.cookie ?? '', headers: { ...admin.headers, 'idempotency-key': 'publish-once' }, body: { label: 'With a key' } })
    const first = await ask()
    const again = await ask()
    expect([first.status, again.status]).toEqual([201, 201])
    expect(again.json.data.number).toBe(first.json.data.number)
    expect(await wholeEditions(instance)).toBe(before + 1)
  })
})
