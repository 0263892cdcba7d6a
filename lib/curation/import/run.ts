import { createHash } from 'node:crypto'
import type { Db, Tx } from '@/db/client'
import { knownCaller } from '@/lib/access/accounts'
import { type Acting, recordAudit } from '@/lib/access/audit'
import { shared } from '@/lib/access/shared'
import { lostStanding } from '@/lib/access/standing'
import { Problem } from '@/lib/problem'
import type { ImportUpload } from '@/openapi/schemas/import'
import { lockForEdit } from '../editing'
import { newestEdition } from '../table'
import { loadGround, type LoadedGround } from './ground'
import { collectAfter } from './memory'
import { checkPlan, planRows, type PlannedRow, type Steps, turn } from './plan'
import { readFile, UnreadableFile } from './read-file'
import { FileRefused, refused } from './refusal'
import { beginImport, type Counts, type End, endImport, moveOn, noCounts, writeReport } from './store'
import { type Reserved, reserveFor, writePlan } from './write'

/** How often a running import says how far it is, in milliseconds. */
const BEAT = 500
/** Imports of this process that may wait for their turn; each holds its file. */
const MOST_WAITING = 4
/** How often an import is worked out anew because the amendment or the edition changed under it. */
const ATTEMPTS = 3

/** Part of the whole work that each stage is. */
const STAGES = { plan: [0, 0.3], check: [0.3, 0.8], write: [0.8, 1] } as const

class Stopped extends Error {}
/** Amendment or edition are not as they were when the rows were checked. */
class GroundMoved extends Error {}

/** Is told of an import that failed as none should, for the log. */
export type Unforeseen = (id: string, error: unknown) => void

interface Job { db: Db; acting: Acting; id: string; amendment: string; bytes: Buffer; upload: ImportUpload; dryRun: boolean; reserved: Reserved; unforeseen: Unforeseen }

/** How far a job is, told to the database at every beat and not oftener. */
class Progress {
  private readonly abort = new AbortController()
  private readonly timer: NodeJS.Timeout
  private beating = false
  total = 0
  done = 0

  constructor(private readonly job: Job) {
    this.timer = setInterval(() => void this.beat(), BEAT)
  }

  private async beat(): Promise<void> {
    if (this.beating) return
    this.beating = true
    try {
      // a database that is away for a moment is no reason to end: what is written at the end decides
      if (!(await moveOn(this.job.db, this.job.id, Math.min(this.done, this.total), this.total))) this.abort.abort(new Stopped())
    } catch {
    } finally {
      this.beating = false
    }
  }

  stage(name: keyof typeof STAGES): Steps {
    const [from, to] = STAGES[name]
    return {
      signal: this.abort.signal,
      tell: (share) => {
        this.done = Math.floor(this.total * (from + (to - from) * Math.min(1, share)))
      },
    }
  }

  get signal(): AbortSignal {
    return this.abort.signal
  }

  end(): void {
    clearInterval(this.timer)
  }
}

function countsOf(rows: readonly PlannedRow[]): Counts {
  const counts = noCounts()
  for (const { verdict } of rows) counts[verdict] += 1
  return counts
}

const reportOf = (rows: readonly PlannedRow[]) => rows.map(({ row, verdict, level, findings, fields }) => ({ row, verdict, level, findings: [...findings], fields: [...fields] }))

/** Ends the import in the transaction that wrote what it wrote, or takes all of it back where somebody stopped it. */
async function conclude(tx: Tx, job: Job, end: End, rows: readonly PlannedRow[], steps: Steps): Promise<void> {
  await writeReport(tx, job.amendment, job.id, reportOf(rows), () => turn(steps))
  if (!(await endImport(tx, job.id, end))) throw new Stopped()
}

/** An import takes minutes: who began it may have been closed, lowered or lost the key meanwhile. */
async function requireStanding(tx: Tx, job: Job, hold: boolean): Promise<void> {
  const lost = await lostStanding(tx, job.acting.caller, 'curator', hold)
  if (lost !== null) throw refused('standing_lost', lost)
}

/** Writes the changes, if the amendment and the edition are as they were when these were checked. */
async function commit(job: Job, ground: LoadedGround, rows: readonly PlannedRow[], others: Awaited<ReturnType<typeof checkPlan>>, end: End, steps: Steps): Promise<void> {
  await reserveFor(job.db, rows, job.reserved)
  await job.db.transaction(async (tx) => {
    const amendment = await lockForEdit(tx, job.amendment)
    if (amendment.version !== ground.version || (await newestEdition(tx)) !== ground.table.edition) throw new GroundMoved()
    await requireStanding(tx, job, false)
    const written = await writePlan(tx, { amendment, author: knownCaller(job.acting.caller).userId, importId: job.id, ground, reserved: job.reserved, others }, rows, steps)
    if (written !== null) {
      await recordAudit(tx, job.acting, {
        action: 'amendment.import', subjectKind: 'amendment', subjectId: job.amendment, before: { version: amendment.version, state: amendment.state },
        after: { version: written.version, state: written.state, import: job.id, file_name: job.upload.file.name, sha256: sha256(job.bytes), counts: end.counts },
      })
    }
    collectAfter(rows.length)
    await conclude(tx, job, end, rows, steps)
    // held only now: whoever closes the account should not wait for all the rows
    await requireStanding(tx, job, true)
  })
}

/** Reads, matches, checks and writes once; of the file nothing stays in memory but its bytes. */
async function attempt(job: Job, progress: Progress): Promise<void> {
  const file = await readFile(job.bytes, job.upload, (rows) => {
    progress.total = rows
    progress.signal.throwIfAborted()
  })
  const total = file.rows.length
  progress.total = total
  collectAfter(total)
  const ground = await loadGround(job.db, job.amendment, file)
  const rows = await planRows(file, ground, progress.stage('plan'))
  collectAfter(total)
  const others = await checkPlan(rows, ground, progress.stage('check'))
  collectAfter(total)
  const counts = countsOf(rows)
  const bad = counts.error + counts.ambiguous > 0
  const end: End = { state: bad ? 'refused' : 'done', reading: file.reading, rowsTotal: total, counts, problems: [] }
  const steps = progress.stage('write')
  if (bad || job.dryRun) await job.db.transaction((tx) => conclude(tx, job, end, rows, steps))
  else await commit(job, ground, rows, others, end, steps)
  collectAfter(total)
}

async function work(job: Job, progress: Progress): Promise<void> {
  for (let tries = 1; ; tries += 1) {
    try {
      return await attempt(job, progress)
    } catch (error) {
      if (!(error instanceof GroundMoved)) throw error
      if (tries === ATTEMPTS) throw refused('amendment_changed', 'The amendment or the newest edition changed again and again while the rows were being checked; import the file again when nobody else is at work on it.')
    }
  }
}

/** Runs an import to its end, whatever that is; throws only what nobody could foresee. */
async function run(job: Job): Promise<void> {
  const progress = new Progress(job)
  try {
    await inTurn(() => work(job, progress))
  } catch (error) {
    if (error instanceof Stopped) return
    const refusal = error instanceof FileRefused ? error.problems : error instanceof Problem && error.status < 500 ? [{ code: error.code, detail: error.detail }] : null
    const unreadable = error instanceof UnreadableFile ? error : null
    const end: End = { state: refusal === null ? 'failed' : 'refused', reading: unreadable?.reading ?? null, rowsTotal: unreadable?.rowsTotal ?? 0, counts: noCounts(), problems: refusal ?? [] }
    if (refusal !== null) await endImport(job.db, job.id, end)
    else {
      job.unforeseen(job.id, error)
      await endImport(job.db, job.id, end).catch((failure: unknown) => job.unforeseen(job.id, failure))
      throw error
    }
  } finally {
    progress.end()
  }
}

/** One import at a time in a process: together they would need more memory than a server should take. */
const queue = () => shared('imports', () => ({ last: Promise.resolve() as Promise<unknown>, waiting: 0 }))

async function inTurn(act: () => Promise<void>): Promise<void> {
  const line = queue()
  const before = line.last
  const mine = before.then(act, act)
  line.last = mine.catch(() => undefined)
  line.waiting += 1
  try {
    await mine
  } finally {
    line.waiting -= 1
  }
}

const sha256 = (bytes: Buffer): string => createHash('sha256').update(bytes).digest('hex')

/** Begins an import. `finished` is settled when it has ended; it ends all the same when nobody waits for it. */
export async function startImport(db: Db, acting: Acting, amendment: string, upload: ImportUpload, dryRun: boolean, unforeseen: Unforeseen): Promise<{ id: string; finished: Promise<void> }> {
  const { file } = upload
  if (queue().waiting > MOST_WAITING) throw new Problem('imports_waiting', 'Several imports are waiting for their turn already; send it again in a while.', { headers: { 'retry-after': '15' } })
  const id = await db.transaction(async (tx) => {
    await lockForEdit(tx, amendment)
    return beginImport(tx, { amendment, author: knownCaller(acting.caller).userId, fileName: file.name === '' ? 'table' : file.name, sha256: sha256(file.bytes), bytes: file.bytes.byteLength, dryRun })
  })
  return { id, finished: run({ db, acting, id, amendment, bytes: file.bytes, upload, dryRun, reserved: new Map(), unforeseen }) }
}

