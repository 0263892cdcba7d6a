import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { type Instance, startInstance } from '../support/instance'
import { addChanges, bringThrough, newAmendment, notedAgain, seededRandom, type Signed, wait, wholeEditions } from './workbench'

/** 8 of them in npm test; npm run soak asks for 50. KILLS_SEED runs a series again. */
const KILLS = Number(process.env.KILLS || 8)
const random = seededRandom(Number(process.env.KILLS_SEED || 20_261_201))
const OF_EACH = Math.ceil(KILLS / 2)

let instance: Instance
let author: Signed
let reviewer: Signed
let admin: Signed
let levels: string[] = []

beforeAll(async () => {
  instance = await startInstance('kills')
  await signEveryoneIn()
  levels = ((await instance.get('/levels?limit=1000')).json.data as { id: string }[]).map(({ id }) => id)
})
afterAll(() => instance.end())

async function signEveryoneIn(): Promise<void> {
  author = await instance.signIn('curator')
  reviewer = await instance.signIn('second.curator')
  admin = await instance.signIn('admin')
}

/** What became of a request whose server may have died under it: its status, or null. */
const outcomeOf = (asked: Promise<{ status: number }>): Promise<number | null> => asked.then((reply) => reply.status, () => null)

async function killAfter(milliseconds: number, asked: Promise<{ status: number }>): Promise<number | null> {
  const outcome = outcomeOf(asked)
  await wait(milliseconds)
  await instance.kill()
  const status = await outcome
  await instance.start()
  return status
}

async function accepted(title: string): Promise<string> {
  const amendment = await newAmendment(instance, author, title)
  await addChanges(instance, author, amendment, await notedAgain(instance, levels, title))
  await bringThrough(instance, author, reviewer, amendment)
  return amendment
}

const publish = (label: string) => instance.ask('post', '/editions', { ...admin, body: { label } })
const stateOf = async (amendment: string) => (await instance.query<{ state: string }>('select state from amendments where id = $1', [amendment]))[0]?.state

describe('publishing, killed at any moment', () => {
  it(`leaves the edition before or the edition after, ${OF_EACH} times`, async () => {
    let amendment = await accepted('As long as it takes')
    const from = performance.now()
    expect((await publish('Undisturbed')).status).toBe(201)
    const whole = performance.now() - from
    let newest = await wholeEditions(instance)
    expect(newest).toBe(2)
    const seen = { before: 0, after: 0 }
    amendment = await accepted('Killed')
    for (let kill = 0; kill < OF_EACH; kill += 1) {
      const status = await killAfter(random() * 1.3 * whole, publish(`Killed ${kill}`))
      const now = await wholeEditions(instance)
      const published = now === newest + 1
      expect(now, 'at most one edition more').toBe(published ? newest + 1 : newest)
      expect(await stateOf(amendment)).toBe(published ? 'published' : 'accepted')
      // what was answered has happened
      if (status === 201) expect(published).toBe(true)
      expect((await instance.get('/health/ready')).status).toBe(200)
      expect((await instance.get('/editions')).json.data[0].number).toBe(now)
      seen[published ? 'after' : 'before'] += 1
      newest = now
      if (published) {
        await signEveryoneIn()
        amendment = await accepted(`Killed again ${kill}`)
      }
    }
    expect(seen.before + seen.after).toBe(OF_EACH)
    // and goes on as if nothing had been
    expect((await publish('After all')).status).toBe(201)
    expect(await wholeEditions(instance)).toBe(newest + 1)
  }, 60_000 + 40_000 * OF_EACH)
})

const ROWS = 3000
/** Invented levels, told apart by their repeat index. */
function table(note: string): string {
  const rows = Array.from({ length: ROWS }, (_, k) => `Na-I,${8 + (k % 5)}p,LS,2P*1/2,${Math.floor(k / 5) + 1},${(40_000 + k * 0.01).toFixed(2)},sansonetti-2008-na,computed,${note}`)
  return ['species,configuration,coupling,term,repeat_index,energy_literal,energy_source,energy_evidence,note', ...rows].join('\r\n')
}

function importFile(amendment: string, text: string): Promise<{ status: number; text: string }> {
  const form = new FormData()
  form.set('file', new Blob([text], { type: 'text/csv' }), 'invented.csv')
  return fetch(`${instance.base}/api/v1/amendments/${amendment}/import?dry_run=false`, { method: 'POST', headers: { ...author.headers, cookie: author.cookie ?? '' }, body: form })
    .then(async (response) => ({ status: response.status, text: await response.text() }))
}

describe('importing, killed at any moment', () => {
  it(`leaves all rows or none, ${OF_EACH} times`, async () => {
    const changesOf = async (amendment: string) => (await instance.query<{ n: number }>('select count(*)::int as n from amendment_changes where amendment_id = $1', [amendment]))[0]?.n ?? -1
    const timed = await newAmendment(instance, author, 'As long as it takes')
    const from = performance.now()
    const undisturbed = await importFile(timed, table('undisturbed'))
    expect(undisturbed.status, undisturbed.text.slice(0, 500)).toBe(200)
    expect(JSON.parse(undisturbed.text).data).toMatchObject({ state: 'done', counts: { new: ROWS, error: 0 } })
    const whole = performance.now() - from
    expect(await changesOf(timed)).toBe(ROWS)
    let last = timed
    for (let kill = 0; kill < OF_EACH; kill += 1) {
      const amendment = await newAmendment(instance, author, `Killed ${kill}`)
      const status = await killAfter(random() * 1.2 * whole, importFile(amendment, table(`killed ${kill}`)))
      const n = await changesOf(amendment)
      expect([0, ROWS]).toContain(n)
      if (status === 200) expect(n).toBe(ROWS)
      const told = (await instance.get(`/amendments/${amendment}/imports`, author)).json.data as { state: string }[]
      // one that never began has left no trace
      for (const { state } of told) expect(n === ROWS ? ['done'] : ['interrupted', 'running']).toContain(state)
      last = amendment
    }
    // the lost import is known for one when it has stood still for a while, and then the amendment takes the file again
    for (let patience = 0; patience < 120; patience += 1) {
      const told = (await instance.get(`/amendments/${last}/imports`, author)).json.data as { state: string }[]
      if (told.every(({ state }) => state !== 'running')) break
      await wait(250)
    }
    const again = await importFile(last, table(`killed ${OF_EACH - 1}`))
    expect(again.status, again.text.slice(0, 500)).toBe(200)
    expect(await changesOf(last)).toBe(ROWS)
    expect(await wholeEditions(instance)).toBeGreaterThanOrEqual(1)
  }, 60_000 + 60_000 * OF_EACH)
})
