import fs from 'node:fs'
import type { Import } from '@/openapi/schemas/import'
import { inventedTable } from './import-table'

const ROWS = Number(process.env.BENCH_IMPORT_ROWS ?? 100_000)
const LIMITS = { dryRun: 30, commit: 60, megabytes: 500 }

export interface Served { base: string; pid: number; key: string }

const memoryOf = (pid: number): number => Number(/VmRSS:\s+(\d+)/.exec(fs.readFileSync(`/proc/${pid}/status`, 'utf8'))?.[1] ?? 0) / 1000
/** Processor time of the server, seconds: what does not depend on what else the machine does. */
const processorOf = (pid: number): number => {
  const [user = 0, system = 0] = fs.readFileSync(`/proc/${pid}/stat`, 'utf8').replace(/^.*\) /s, '').split(' ').slice(11, 13).map(Number)
  return (user + system) / 100
}
const pause = (milliseconds: number): Promise<void> => new Promise((done) => setTimeout(done, milliseconds))

interface Run { made: Import; seconds: number; processor: number; megabytes: number; p95: number; slowest: number }

/** Highest resident memory of the server, and how long other requests take, while `act` runs. */
async function watched({ base, pid }: Served, act: () => Promise<Import>): Promise<Run> {
  let megabytes = 0
  let done = false
  const times: number[] = []
  const memory = setInterval(() => {
    megabytes = Math.max(megabytes, memoryOf(pid))
  }, 100)
  const others = (async () => {
    while (!done) {
      const from = performance.now()
      await (await fetch(`${base}/api/v1/levels/Na-I.3?edition=1`)).arrayBuffer()
      times.push(performance.now() - from)
      await pause(50)
    }
  })()
  const [from, before] = [performance.now(), processorOf(pid)]
  try {
    const made = await act()
    const processor = processorOf(pid) - before
    const seconds = (performance.now() - from) / 1000
    done = true
    await others
    times.sort((a, b) => a - b)
    return { made, seconds, processor, megabytes, p95: times[Math.floor(0.95 * times.length)] ?? 0, slowest: times.at(-1) ?? 0 }
  } finally {
    done = true
    clearInterval(memory)
  }
}

/** Imports an invented table into a served instance: dry, for good, and once more. False where a promise is broken. */
export async function reportImport(served: Served): Promise<boolean> {
  const { base, key } = served
  const post = async <T>(path: string, body: BodyInit, headers: Record<string, string> = {}): Promise<T> => {
    const response = await fetch(`${base}/api/v1${path}`, { method: 'POST', body, headers: { authorization: `Bearer ${key}`, ...headers } })
    const answer = (await response.json()) as { data: T }
    if (!response.ok) throw new Error(`${path} answered ${response.status}: ${JSON.stringify(answer).slice(0, 500)}`)
    return answer.data
  }
  const json = { 'content-type': 'application/json' }
  const amendment = await post<{ id: string }>('/amendments', JSON.stringify({ title: 'An invented table' }), json)
  await post(`/amendments/${amendment.id}/changes`, JSON.stringify({ kind: 'source', action: 'create', source: 'invented-levels', values: { citation: 'Invented for measuring', kind: 'other' } }), json)
  const file = new Blob([inventedTable(ROWS)], { type: 'text/csv' })
  const send = async (query: string): Promise<Import> => {
    const form = new FormData()
    form.set('file', file, 'invented.csv')
    const made = await post<Import>(`/amendments/${amendment.id}/import${query}`, form)
    if (made.state !== 'done') throw new Error(made.summary)
    return made
  }
  let kept = true
  const tell = (what: string, value: number, limit: number, unit: string): void => {
    if (value > limit) kept = false
    console.log(`${value <= limit ? 'kept  ' : 'BROKEN'} ${what}: ${value.toFixed(2)} ${unit} (at most ${limit} ${unit})`)
  }
  for (const [name, query, limit] of [['dry run', '?dry_run=true', LIMITS.dryRun], ['commit', '', LIMITS.commit], ['the same file again', '', LIMITS.commit]] as const) {
    const run = await watched(served, () => send(query))
    tell(`import of ${ROWS} rows, ${name}`, run.seconds, limit, 's')
    tell('   resident memory of the server meanwhile', run.megabytes, LIMITS.megabytes, 'MB')
    console.log(`          ${run.made.summary} Processor time of the server ${run.processor.toFixed(1)} s. Other requests meanwhile: p95 ${run.p95.toFixed(0)} ms, slowest ${run.slowest.toFixed(0)} ms`)
  }
  return kept
}
