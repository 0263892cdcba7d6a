import { EventEmitter } from 'node:events'
import { describe, expect, it } from 'vitest'
import { PhysicsError } from '@/lib/atomic/errors'
import { Problem } from '@/lib/problem'
import { streamedAnswer } from '@/lib/prediction/bulk/answer'
import type { HeavyJob } from '@/lib/prediction/bulk/heavy'
import { type FromWorker, type Job, Pool, type PoolEvent, type PoolSettings, type ToWorker, type WorkerLike } from '@/lib/prediction/bulk/pool'
import { Turns } from '@/lib/prediction/bulk/turns'
import { serveJobs } from '@/lib/prediction/bulk/worker-side'

interface Counting { caller: string; chunks: number; throws?: string }
const chunk = (text: string) => new TextEncoder().encode(text)

/** A worker in this thread: the same code on its side, messages one turn of the event loop later. It notes what it computes. */
class FakeWorker extends EventEmitter implements WorkerLike {
  readonly computed: string[] = []
  readonly returned: string[] = []
  private readonly inside = new EventEmitter()

  constructor() {
    super()
    serveJobs(
      {
        postMessage: (message: FromWorker) => void setImmediate(() => this.emit('message', message)),
        on: (_event, listener) => this.inside.on('message', listener),
      },
      (job) => this.count(job as Counting),
    )
  }

  private *count({ caller, chunks, throws }: Counting): Generator<Uint8Array | null> {
    try {
      for (let i = 0; i < chunks; i += 1) {
        yield null
        if (throws === 'physics') throw new PhysicsError('table_too_large', 'too large')
        if (throws === 'fault') throw new Error('a fault')
        this.computed.push(caller)
        yield chunk(`${caller}${i} `)
      }
    } finally {
      this.returned.push(caller)
    }
  }

  postMessage(message: ToWorker): void {
    setImmediate(() => this.inside.emit('message', message))
  }

  terminate(): void {
    this.removeAllListeners()
  }

  unref(): void {
    // nothing holds this process
  }
}

function made(settings: Partial<PoolSettings> = {}) {
  const workers: FakeWorker[] = []
  const events: PoolEvent[] = []
  const spawn = () => {
    const worker = new FakeWorker()
    workers.push(worker)
    return worker
  }
  return { workers, events, pool: new Pool({ spawn, workers: 1, tell: (event) => events.push(event), ...settings }) }
}

async function whole(job: Job): Promise<string> {
  let text = ''
  for (let bytes = await job.next(); bytes !== null; bytes = await job.next()) text += new TextDecoder().decode(bytes)
  return text
}
const turns = async (count: number) => {
  for (let i = 0; i < count; i += 1) await new Promise((resolve) => setImmediate(resolve))
}
const count = (caller: string, chunks: number, throws?: string): Counting => ({ caller, chunks, ...(throws === undefined ? {} : { throws }) })

describe('queues in turn', () => {
  it('serve each caller once before anyone twice', () => {
    const queues = new Turns<string>()
    for (const item of ['a1', 'a2', 'a3', 'b1', 'c1', 'b2']) queues.add(item.charAt(0), item)
    const order = Array.from({ length: 6 }, () => queues.take(() => true))
    expect(order).toEqual(['a1', 'b1', 'c1', 'a2', 'b2', 'a3'])
    expect(queues.take(() => true)).toBeUndefined()
  })

  it('pass over whoever may not be served, and forget what is taken out', () => {
    const queues = new Turns<string>()
    for (const item of ['a1', 'b1', 'b2']) queues.add(item.charAt(0), item)
    expect(queues.take((caller) => caller !== 'a')).toBe('b1')
    expect(queues.remove('b', 'b2')).toBe(true)
    expect(queues.remove('b', 'b2')).toBe(false)
    expect([queues.size, queues.of('a'), queues.of('b')]).toEqual([1, 1, 0])
  })
})

describe('the pool', () => {
  it('gives every chunk in order, and computes no more than a little ahead of what was taken', async () => {
    const { pool, workers } = made()
    const job = await pool.open('a', count('a', 50))
    await job.next()
    await turns(100)
    // one taken, two ready, one that may be on its way
    expect(workers[0]?.computed.length).toBeLessThanOrEqual(4)
    expect(await whole(job)).toBe(Array.from({ length: 49 }, (_, i) => `a${i + 1} `).join(''))
    expect(pool.load).toEqual({ active: 0, waiting: 0 })
  })

  it('lets callers take turns, slice by slice', async () => {
    const { pool, workers } = made()
    const jobs = await Promise.all([pool.open('a', count('a', 60)), pool.open('a', count('a', 60)), pool.open('b', count('b', 60))])
    await Promise.all(jobs.map(whole))
    // a has two jobs and b one: while both had work to do, b got half of the worker and not a third
    const upToLastOfB = (workers[0]?.computed ?? []).slice(0, (workers[0]?.computed.lastIndexOf('b') ?? 0) + 1)
    const share = upToLastOfB.filter((caller) => caller === 'b').length / upToLastOfB.length
    expect(share).toBeGreaterThan(0.4)
    expect(share).toBeLessThan(0.6)
  })

  it('works on a few jobs of one caller at once, lets a few wait, refuses more with 429, and keeps nobody else waiting for them', async () => {
    const { pool } = made({ perCaller: 2, waitingPerCaller: 2 })
    const first = await Promise.all([pool.open('a', count('a', 5)), pool.open('a', count('a', 5))])
    const waiting = [pool.open('a', count('a', 5)), pool.open('a', count('a', 5))]
    expect(pool.load).toEqual({ active: 2, waiting: 2 })
    expect(() => pool.open('a', count('a', 5))).toThrowError(expect.objectContaining({ code: 'heavy_requests_waiting', status: 429, headers: { 'retry-after': '5' } }))
    expect(await whole(await pool.open('b', count('b', 2)))).toBe('b0 b1 ')
    await Promise.all(first.map(whole))
    expect(await Promise.all(waiting.map(async (job) => whole(await job)))).toEqual(['a0 a1 a2 a3 a4 ', 'a0 a1 a2 a3 a4 '])
    expect(pool.load).toEqual({ active: 0, waiting: 0 })
  })

  it('stops work whose caller left, tells of it, and goes on with what waits', async () => {
    const { pool, workers, events } = made({ perCaller: 1 })
    const left = await pool.open('a', count('a', 1000))
    await left.next()
    const next = pool.open('a', count('n', 3))
    left.cancel()
    expect(await whole(await next)).toBe('n0 n1 n2 ')
    const done = workers[0]?.computed.filter((caller) => caller === 'a').length ?? 0
    expect(done).toBeLessThan(10)
    await turns(50)
    expect(workers[0]?.computed.filter((caller) => caller === 'a')).toHaveLength(done)
    expect(workers[0]?.returned).toContain('a')
    expect(pool.counts.cancelled).toBe(1)
    expect(events.map((event) => event.event)).toEqual(['cancelled'])
  })

  it('admits nothing for a caller who has left already', async () => {
    const { pool, workers } = made()
    await expect(pool.open('a', count('a', 3), AbortSignal.abort())).rejects.toMatchObject({ code: 'computing_interrupted' })
    expect([pool.load, workers.length, pool.counts.cancelled]).toEqual([{ active: 0, waiting: 0 }, 0, 0])
  })

  it('forgets a job that waits when its caller leaves', async () => {
    const { pool, workers } = made({ perCaller: 1 })
    const first = await pool.open('a', count('a', 3))
    const leaving = new AbortController()
    const waiting = pool.open('a', count('w', 3), leaving.signal)
    leaving.abort()
    await expect(waiting).rejects.toBeInstanceOf(Error)
    expect(pool.load).toEqual({ active: 1, waiting: 0 })
    await whole(first)
    await turns(20)
    expect(workers[0]?.computed).not.toContain('w')
  })

  it('ends what waits too long with 503', async () => {
    const { pool } = made({ perCaller: 1, longestWaitMs: 20 })
    const first = await pool.open('a', count('a', 3))
    await expect(pool.open('a', count('a', 3))).rejects.toMatchObject({ code: 'computing_interrupted', status: 503 })
    await whole(first)
  })

  it('gives up a job whose reader takes nothing for long, so that its place is free, and breaks its answer off', async () => {
    const { pool, workers, events } = made({ workers: 1, perWorker: 1, longestStallMs: 20 })
    const stalled = await pool.open('a', count('a', 1000))
    await stalled.next()
    expect(await whole(await pool.open('b', count('b', 2)))).toBe('b0 b1 ')
    await expect(stalled.next()).rejects.toMatchObject({ code: 'computing_interrupted' })
    expect(events.map(({ event }) => event)).toEqual(['stalled'])
    expect([pool.load.active, pool.counts.cancelled, workers[0]?.returned[0]]).toEqual([0, 0, 'a'])
  })

  it('lets what is made whole be read as slowly as anyone likes', async () => {
    const { pool } = made({ longestStallMs: 10 })
    const job = await pool.open('a', count('a', 3))
    await job.next()
    await job.next()
    await turns(20)
    await new Promise((resolve) => setTimeout(resolve, 30))
    expect(await whole(job)).toBe('a2 ')
  })

  it('answers 503 for the jobs of a worker that was lost, and starts another', async () => {
    const { pool, workers, events } = made()
    const job = await pool.open('a', count('a', 100))
    await job.next()
    const pending = (async () => whole(job))()
    workers[0]?.emit('error', new Error('out of memory'))
    await expect(pending).rejects.toMatchObject({ code: 'computing_interrupted', status: 503, headers: { 'retry-after': '2' } })
    expect(pool.counts.lost).toBe(1)
    expect(events).toEqual([{ event: 'worker_lost', detail: { reason: 'out of memory', jobs: 1 } }])
    expect(await whole(await pool.open('a', count('a', 2)))).toBe('a0 a1 ')
    expect(workers).toHaveLength(2)
  })

  it('passes refusals of physics on, and tells faults to the log and not to the caller', async () => {
    const { pool, events } = made()
    await expect(whole(await pool.open('a', count('a', 1, 'physics')))).rejects.toMatchObject({ name: 'PhysicsError', code: 'table_too_large' })
    const fault = await whole(await pool.open('a', count('a', 1, 'fault'))).catch((error: unknown) => error)
    expect(fault).toBeInstanceOf(Problem)
    expect(fault).toMatchObject({ status: 503 })
    expect((fault as Problem).detail).not.toContain('a fault')
    expect(events.map((event) => event.event)).toEqual(['job_failed'])
    expect(pool.load.active).toBe(0)
  })
})

describe('a streamed answer', () => {
  const job = (chunks: number, throws?: string) => count('a', chunks, throws) as unknown as HeavyJob
  it('is read to its end', async () => {
    const { pool } = made()
    const stream = await streamedAnswer(pool, 'a', job(5), new AbortController().signal)
    expect(await new Response(stream).text()).toBe('a0 a1 a2 a3 a4 ')
  })

  it('ends the work where its reader leaves', async () => {
    const { pool } = made()
    const stream = await streamedAnswer(pool, 'a', job(1000), new AbortController().signal)
    const reader = stream.getReader()
    await reader.read()
    await reader.cancel()
    expect(pool.counts.cancelled).toBe(1)
    expect(pool.load.active).toBe(0)
  })

  it('ends the work where the connection is cut', async () => {
    const { pool } = made()
    const gone = new AbortController()
    await streamedAnswer(pool, 'a', job(1000), gone.signal)
    gone.abort()
    expect(pool.counts.cancelled).toBe(1)
    expect(pool.load.active).toBe(0)
  })

  it('refuses before a byte is sent what fails at once, and breaks off, not ends, what fails later', async () => {
    const { pool, workers } = made()
    await expect(streamedAnswer(pool, 'a', job(3, 'physics'), new AbortController().signal)).rejects.toMatchObject({ code: 'table_too_large' })
    const reader = (await streamedAnswer(pool, 'a', job(1000), new AbortController().signal)).getReader()
    await reader.read()
    workers[0]?.emit('exit', 1)
    await expect((async () => { for (;;) if ((await reader.read()).done) return 'ended' })()).rejects.toMatchObject({ code: 'computing_interrupted' })
  })
})
