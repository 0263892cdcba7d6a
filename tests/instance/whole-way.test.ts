import { spawnSync } from 'node:child_process'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Reply } from '../api/helpers/client'
import { type Instance, projectFolder, startInstance } from '../support/instance'
import { type Signed, signInAll, withTag } from '../support/signed'

/** The whole way of a correction, from a curator's first word to a follower's mail. The new digits are invented. */
let instance: Instance
let author: Signed
let reviewer: Signed
let admin: Signed
let reader: Signed
beforeAll(async () => {
  instance = await startInstance('whole_way')
  ;({ author, reviewer, admin, reader } = await signInAll(instance))
})
afterAll(() => instance.end())

const D2 = 'Na-I.1~Na-I.3'
const PINNED = ['/levels/Na-I.3?edition=1', `/transitions/${D2}?edition=1`, `/transitions/${D2}/components?field=1.5T&edition=1`, '/editions/1', '/editions/1/levels?format=csv', '/species?edition=1', '/sources?edition=1', '/levels?species=Na-I&edition=1']

describe('a sodium level is corrected', () => {
  let amendment = ''
  let etag = ''
  let change = ''
  const pinned = new Map<string, Reply>()

  it('is drafted; findings and the lines that move are told at once', async () => {
    for (const at of PINNED) pinned.set(at, await instance.get(at))
    const follow = await instance.ask('post', '/follows', { ...reader, body: { subject: D2 } })
    expect(follow.status, follow.text).toBe(201)
    const made = await instance.ask('post', '/amendments', { ...author, body: { title: 'Na I 3p 2P*3/2 from an invented comb measurement' } })
    expect(made.status, made.text).toBe(201)
    amendment = made.json.data.id
    const { values, revision } = (await instance.get('/levels/Na-I.3/values')).json.data
    expect(revision).toBe(1)
    const bad = await instance.ask('post', `/amendments/${amendment}/changes`, { ...author, body: { action: 'replace', level: 'Na-I.3', values: { ...values, energy_invcm: undefined, energy_literal: '16973.37619', term: '2P3/2' } } })
    expect(bad.status, bad.text).toBe(201)
    expect((bad.json.data.findings as { severity: string }[]).some(({ severity }) => severity === 'error')).toBe(true)
    change = bad.json.data.id
    const blocked = await instance.ask('post', `/amendments/${amendment}/submit`, { ...withTag(author, (await instance.get(`/amendments/${amendment}`, author)).json.data.etag), body: { comment: 'please' } })
    expect([409, 422]).toContain(blocked.status)
    const good = await instance.ask('put', `/amendments/${amendment}/changes/${change}`, { ...withTag(author, bad.json.data.etag), body: { action: 'replace', level: 'Na-I.3', values: { ...values, energy_invcm: undefined, energy_literal: '16973.37619' } } })
    expect(good.status, good.text).toBe(200)
    const { findings, consequences, fields } = good.json.data
    expect((findings as { severity: string; code: string }[]).filter(({ severity }) => severity === 'error')).toEqual([])
    expect((findings as { severity: string }[]).length).toBeGreaterThan(0)
    expect(fields).toContainEqual({ field: 'energy_invcm', before: 16973.36619, after: 16973.37619 })
    const line = (consequences.lines as { transition: string; shift_invcm: number; effect: string }[]).find(({ transition }) => transition === D2)
    expect(line?.effect).toBe('moved')
    expect(line?.shift_invcm).toBeCloseTo(0.01, 8)
  })

  it('needs a word on its warnings, and is submitted', async () => {
    const silent = await instance.ask('post', `/amendments/${amendment}/submit`, { ...withTag(author, (await instance.get(`/amendments/${amendment}`, author)).json.data.etag), body: {} })
    expect([409, 422]).toContain(silent.status)
    const submitted = await instance.ask('post', `/amendments/${amendment}/submit`, { ...withTag(author, (await instance.get(`/amendments/${amendment}`, author)).json.data.etag), body: { comment: 'The shift is meant.' } })
    expect(submitted.status, submitted.text).toBe(200)
    etag = submitted.json.data.etag
  })

  it('is not accepted by its author, and is by a colleague', async () => {
    const own = await instance.ask('post', `/amendments/${amendment}/accept`, { ...withTag(author, etag), body: {} })
    expect(own.status).toBe(403)
    expect(own.json.code).toBe('own_amendment')
    const waiting = (await instance.get('/me/tasks', reviewer)).json.data.to_review as { id: string }[]
    expect(waiting.map(({ id }) => id)).toContain(amendment)
    const accepted = await instance.ask('post', `/amendments/${amendment}/accept`, { ...withTag(reviewer, etag), body: { comment: 'Seen.' } })
    expect(accepted.status, accepted.text).toBe(200)
  })

  it('is published as edition 2 by an admin only, with notes from its changes', async () => {
    const refused = await instance.ask('post', '/editions', { ...reviewer, body: { label: 'Second edition' } })
    expect(refused.status).toBe(403)
    const preview = (await instance.get('/editions/next', admin)).json.data
    expect(preview.number).toBe(2)
    expect(preview.notes).toContain('Na I')
    const published = await instance.ask('post', '/editions', { ...admin, body: { label: 'Second edition' } })
    expect(published.status, published.text).toBe(201)
    expect(published.json.data).toMatchObject({ number: 2, label: 'Second edition' })
    expect((await instance.get('/levels/Na-I.3')).json.data).toMatchObject({ energy_invcm: 16973.37619, energy_literal: '16973.37619', revision: 2 })
  })

  it('leaves edition 1 as it was, byte for byte, under its old entity tags', async () => {
    for (const [at, before] of pinned) {
      const now = await instance.get(at)
      expect(now.headers.etag, at).toBe(before.headers.etag)
      // meta of the newest edition is no part of a pinned answer
      expect(now.bytes.equals(before.bytes), at).toBe(true)
      expect((await instance.get(at, { headers: { 'if-none-match': before.headers.etag ?? '' } })).status, at).toBe(304)
    }
  })

  it('shows in the comparison, the feed and the history of the level', async () => {
    const changes = (await instance.get('/editions/2/changes?since=1')).json.data as { level?: string; subject?: string; fields: { field: string; before: unknown; after: unknown }[] }[]
    expect(changes).toHaveLength(1)
    expect(changes[0]?.fields).toContainEqual({ field: 'energy_invcm', before: 16973.36619, after: 16973.37619 })
    const feed = (await instance.get('/changes?after=0')).json.data as { subject: string; edition: number; sequence: number }[]
    expect(feed).toHaveLength(1)
    expect(feed[0]).toMatchObject({ subject: 'Na-I.3', edition: 2 })
    expect((await instance.get(`/changes?after=${feed[0]?.sequence}`)).json.data).toEqual([])
    const history = (await instance.get('/levels/Na-I.3/history')).json.data as unknown[]
    expect(history).toHaveLength(2)
  })

  it('is told to the follower by mail, with old, new and what it does to the line', async () => {
    let mail: { subject: string; text: string } | undefined
    for (let patience = 0; patience < 150 && mail === undefined; patience += 1) {
      const mails = (await instance.get('/outbox', reader)).json.data as { subject: string; text: string }[]
      mail = mails.find(({ text }) => text.includes('16973.37619') || text.includes('16 973.37619'))
      if (mail === undefined) await new Promise((done) => setTimeout(done, 200))
    }
    expect(mail?.text).toContain('16973.36619')
    expect(mail?.text).toMatch(/Na-I\.3|3p/)
    expect(mail?.text).toMatch(/588\.99/)
  })

  it('has a checksum that anyone can make again from the download', () => {
    for (const n of ['1', '2']) {
      const verified = spawnSync(process.execPath, ['db/scripts/verify-edition.mjs', n, '--url', instance.base], { cwd: projectFolder, encoding: 'utf8', env: { ...process.env, ...instance.env } })
      expect(verified.status, `${verified.stdout}${verified.stderr}`).toBe(0)
    }
  })

  it('stands in the audit, each step with who took it', async () => {
    const events = (await instance.get(`/audit?subject_id=${amendment}`, admin)).json.data as { action: string; actor: { name: string } }[]
    const steps = events.map(({ action }) => action)
    for (const action of ['amendment.create', 'amendment.submit', 'amendment.accept']) expect(steps).toContain(action)
    expect(new Set(events.map(({ actor }) => actor.name)).size).toBeGreaterThanOrEqual(2)
  })
})
