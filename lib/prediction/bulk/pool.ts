import { PhysicsError } from '@/lib/atomic/errors'
import { Problem } from '@/lib/problem'
import { Turns } from '@/lib/prediction/bulk/turns'

/** What goes to a worker. */
export type ToWorker = { type: 'open'; id: number; job: unknown } | { type: 'next'; id: number } | { type: 'drop'; id: number }
/** What comes back: a chunk, a pause (some work was done, nothing is ready), the end, or a failure of one job. */
export type FromWorker = { type: 'chunk'; id: number; bytes: Uint8Array } | { type: 'pause'; id: number } | { type: 'done'; id: number } | { type: 'failed'; id: number; reason: string; refusal: { code: string; detail: string } | null }

/** The part of a worker thread that the pool uses. */
export interface WorkerLike {
  postMessage(message: ToWorker): void
  on(event: 'message', listener: (message: FromWorker) => void): unknown
  on(event: 'error', listener: (error: unknown) => void): unknown
  on(event: 'exit', listener: (code: number) => void): unknown
  terminate(): unknown
  unref(): void
}

export interface PoolEvent {
  event: 'cancelled' | 'stalled' | 'worker_lost' | 'job_failed'
  detail: Record<string, unknown>
}

export interface PoolSettings {
  spawn: () => WorkerLike
  workers: number
  /** Jobs of one caller that are worked on at once, and that may wait besides. */
  perCaller?: number
  waitingPerCaller?: number
  /** Jobs that one worker holds at once: each may hold some tens of megabytes. */
  perWorker?: number
  longestWaitMs?: number
  /** How long a chunk may lie ready untaken before its job is given up. */
  longestStallMs?: number
  tell?: (event: PoolEvent) => void
}

/** Slices that a worker has at once: one being worked on, one to go on with. */
const IN_FLIGHT = 2
/** Chunks of one job that are ready or asked for: two, so that a caller of one job has as many turns as one of several. */
const AHEAD = 2

const LEFT_BEFORE = 'The caller left before the computation began.'

const interrupted = (detail: string): Problem => new Problem('computing_interrupted', detail, { headers: { 'retry-after': '2' } })

interface Bench {
  worker: WorkerLike
  jobs: Set<Job>
  turns: Turns<Job>
  inFlight: number
}

/** A computation in a worker: its chunks are asked for one by one, and nothing is computed far beyond what was taken. */
export class Job {
  /** Chunks that came and were not taken. */
  private readonly ready: Uint8Array[] = []
  private taker: { resolve: (chunk: Uint8Array | null) => void; reject: (reason: unknown) => void } | null = null
  private ended = false
  private failure: unknown = null
  private stall: ReturnType<typeof setTimeout> | undefined
  /** Slices that wait for their turn or are being worked on. */
  asked = 0
  chunks = 0

  constructor(readonly id: number, readonly caller: string, private readonly pool: Pool) {}

  /** The next chunk; null at the end. Rejects with a Problem where the worker was lost. */
  next(): Promise<Uint8Array | null> {
    const chunk = this.ready.shift()
    clearTimeout(this.stall)
    if (chunk !== undefined) {
      if (this.ready.length > 0) this.watch()
      this.pool.wants(this)
      return Promise.resolve(chunk)
    }
    if (this.failure !== null) return Promise.reject(this.failure as Error)
    if (this.ended) return Promise.resolve(null)
    this.pool.wants(this)
    return new Promise((resolve, reject) => (this.taker = { resolve, reject }))
  }

  /** Whether a further slice should be worked on. */
  get hungry(): boolean {
    return this.open && this.asked + this.ready.length < AHEAD
  }

  get open(): boolean {
    return !this.ended && this.failure === null
  }

  take(chunk: Uint8Array): void {
    this.chunks += 1
    const { taker } = this
    this.taker = null
    if (taker !== null) return taker.resolve(chunk)
    this.ready.push(chunk)
    if (this.ready.length === 1) this.watch()
  }

  /** A reader that takes nothing for long would keep its place in a worker from others for ever. */
  private watch(): void {
    this.stall = setTimeout(() => this.pool.giveUp(this), this.pool.longestStallMs)
    this.stall.unref()
  }

  end(): void {
    this.ended = true
    this.taker?.resolve(null)
    this.taker = null
  }

  fail(reason: unknown): void {
    clearTimeout(this.stall)
    this.failure = reason
    this.taker?.reject(reason)
    this.taker = null
  }

  /** Whoever asked has gone: the worker stops. */
  cancel(): void {
    if (!this.open) return
    this.end()
    this.release()
    this.pool.drop(this)
  }

  /** Forgets what is ready. */
  release(): void {
    clearTimeout(this.stall)
    this.ready.length = 0
  }
}

interface Waiting {
  caller: string
  job: unknown
  admit: (job: Job) => void
  refuse: (reason: unknown) => void
}

/**
 * Workers for computations too long for the thread that answers. Callers take turns, both at being admitted and slice by slice, so that one
 * who asks for much waits for himself. A worker that is lost costs the jobs it had (`computing_interrupted`, 503) and is started again.
 */
export class Pool {
  private readonly benches: Bench[] = []
  private readonly homes = new Map<Job, Bench>()
  private readonly waiting = new Turns<Waiting>()
  private readonly active = new Map<string, number>()
  private lastId = 0
  /** Since the start: slices worked on, jobs whose caller left, workers lost. */
  readonly counts = { slices: 0, cancelled: 0, lost: 0 }

  constructor(private readonly settings: PoolSettings) {}

  private get perCaller(): number {
    return this.settings.perCaller ?? 2
  }

  get longestStallMs(): number {
    return this.settings.longestStallMs ?? 120_000
  }

  /** Admits a job, at once or when its turn comes. Refuses with 429 where the caller has too many waiting, with 503 after a long wait. */
  open(caller: string, job: unknown, signal?: AbortSignal): Promise<Job> {
    // whoever has left already takes no worker
    if (signal?.aborted === true) return Promise.reject(interrupted(LEFT_BEFORE))
    if (this.waiting.of(caller) >= (this.settings.waitingPerCaller ?? 8)) {
      throw new Problem('heavy_requests_waiting', `${this.perCaller} of your large computations are under way and ${this.waiting.of(caller)} wait; ask again when some have ended.`, { headers: { 'retry-after': '5' } })
    }
    return new Promise((resolve, reject) => {
      const entry: Waiting = { caller, job, admit: resolve, refuse: reject }
      const leave = (reason: unknown): void => {
        if (this.waiting.remove(caller, entry)) reject(reason instanceof Error ? reason : interrupted(LEFT_BEFORE))
        clearTimeout(timer)
      }
      const timer = setTimeout(() => leave(interrupted('Other computations took too long for this one to begin.')), this.settings.longestWaitMs ?? 60_000)
      timer.unref()
      signal?.addEventListener('abort', () => leave(undefined), { once: true })
      entry.admit = (admitted) => {
        clearTimeout(timer)
        // whoever left while this was being admitted takes nothing
        if (signal?.aborted === true) admitted.cancel()
        else signal?.addEventListener('abort', () => admitted.cancel(), { once: true })
        resolve(admitted)
      }
      this.waiting.add(caller, entry)
      this.admit()
    })
  }

  /** Jobs under way and waiting. */
  get load(): { active: number; waiting: number } {
    return { active: this.homes.size, waiting: this.waiting.size }
  }

  private admit(): void {
    const perWorker = this.settings.perWorker ?? 3
    while (this.homes.size < this.settings.workers * perWorker) {
      const next = this.waiting.take((caller) => (this.active.get(caller) ?? 0) < this.perCaller)
      if (next === undefined) return
      const bench = this.benchFor()
      const job = new Job((this.lastId += 1), next.caller, this)
      this.active.set(next.caller, (this.active.get(next.caller) ?? 0) + 1)
      this.homes.set(job, bench)
      bench.jobs.add(job)
      bench.worker.postMessage({ type: 'open', id: job.id, job: next.job })
      next.admit(job)
    }
  }

  /** The worker with least to do, started where there are fewer than there may be. */
  private benchFor(): Bench {
    const idle = this.benches.find((bench) => bench.jobs.size === 0)
    if (idle !== undefined) return idle
    if (this.benches.length < this.settings.workers) return this.start()
    const [first] = [...this.benches].sort((a, b) => a.jobs.size - b.jobs.size)
    return first ?? this.start()
  }

  private start(): Bench {
    const bench: Bench = { worker: this.settings.spawn(), jobs: new Set(), turns: new Turns(), inFlight: 0 }
    bench.worker.unref()
    bench.worker.on('message', (message) => this.hear(bench, message))
    bench.worker.on('error', (error) => this.lose(bench, error))
    bench.worker.on('exit', (code) => this.lose(bench, `it ended with ${code}`))
    this.benches.push(bench)
    return bench
  }

  /** A job would have its next slices worked on. */
  wants(job: Job): void {
    const bench = this.homes.get(job)
    if (bench === undefined) return
    for (; job.hungry; job.asked += 1) bench.turns.add(job.caller, job)
    this.feed(bench)
  }

  private feed(bench: Bench): void {
    while (bench.inFlight < IN_FLIGHT) {
      const job = bench.turns.take(() => true)
      if (job === undefined) return
      bench.inFlight += 1
      bench.worker.postMessage({ type: 'next', id: job.id })
    }
  }

  private hear(bench: Bench, message: FromWorker): void {
    bench.inFlight -= 1
    this.counts.slices += 1
    const job = [...bench.jobs].find((one) => one.id === message.id)
    if (job !== undefined) {
      job.asked -= 1
      if (message.type === 'chunk') job.take(message.bytes)
      else if (message.type === 'done') job.end()
      else if (message.type === 'failed') {
        if (message.refusal !== null) job.fail(new PhysicsError(message.refusal.code, message.refusal.detail))
        else {
          this.settings.tell?.({ event: 'job_failed', detail: { reason: message.reason } })
          job.fail(interrupted('The computation failed; it has been written to the log.'))
        }
      }
      if (job.open) this.wants(job)
      else this.close(job)
    }
    this.feed(bench)
  }

  /** Breaks off a job whose reader is there and takes nothing. */
  giveUp(job: Job): void {
    // what is made whole holds no worker, and may be read as slowly as anyone likes
    if (!job.open) return
    job.fail(interrupted('The answer was not read for too long, so the computation was given up.'))
    job.release()
    this.drop(job, 'stalled')
  }

  /** Forgets a job whose caller left. */
  drop(job: Job, event: 'cancelled' | 'stalled' = 'cancelled'): void {
    const bench = this.homes.get(job)
    if (bench === undefined) return
    if (event === 'cancelled') this.counts.cancelled += 1
    this.settings.tell?.({ event, detail: { caller: job.caller, chunks: job.chunks } })
    bench.worker.postMessage({ type: 'drop', id: job.id })
    this.close(job)
  }

  private close(job: Job): void {
    const bench = this.homes.get(job)
    if (bench === undefined) return
    while (bench.turns.remove(job.caller, job));
    bench.jobs.delete(job)
    this.homes.delete(job)
    const left = (this.active.get(job.caller) ?? 1) - 1
    if (left > 0) this.active.set(job.caller, left)
    else this.active.delete(job.caller)
    this.admit()
  }

  private lose(bench: Bench, reason: unknown): void {
    const at = this.benches.indexOf(bench)
    if (at < 0) return
    this.benches.splice(at, 1)
    this.counts.lost += 1
    this.settings.tell?.({ event: 'worker_lost', detail: { reason: reason instanceof Error ? reason.message : String(reason), jobs: bench.jobs.size } })
    bench.worker.terminate()
    for (const job of [...bench.jobs]) {
      job.fail(interrupted('The process that computes large answers ended. It is being started again.'))
      this.close(job)
    }
  }

  /** Ends all workers; jobs under way are lost. */
  async shutDown(): Promise<void> {
    const benches = [...this.benches]
    for (const bench of benches) this.lose(bench, 'shut down')
    await Promise.all(benches.map((bench) => bench.worker.terminate()))
  }
}
