// Part of npm run bench: imports an invented table into a served instance, and watches its memory and its answers meanwhile.
import fs from 'node:fs'
import { inventedTable } from './import-table.ts'

const ROWS = Number(process.env.BENCH_IMPORT_ROWS ?? 100_000)
const LIMITS = { dryRun: 30, commit: 60, megabytes: 500 }

const memoryOf = (pid) => Number(/VmRSS:\s+(\d+)/.exec(fs.readFileSync(`/proc/${pid}/status`, 'utf8'))?.[1] ?? 0) / 1000

/** Highest resident memory of a process, and the slowest answers of another request, while `act` runs. */
async function watched(pid, base, act) {
  let most = 0
  let done = false
  const times = []
  const memory = setInterval(() => { most = Math.max(most, memoryOf(pid)) }, 100)
  const others = (async () => {
    while (!done) {
      const from = performance.now()
      await (await fetch(`${base}/api/v1/levels/Na-I.3?edition=1`)).arrayBuffer()
      times.push(performance.now() - from)
      await new Promise((next) => setTimeout(next, 50))
    }
  })()
  const from = performance.now()
  const value = await act()
  const seconds = (performance.now() - from) / 1000
  done = true
  await others
  clearInterval(memory)
  times.sort((a, b) => a - b)
  return { value, seconds, megabytes: most, p95: times[Math.floor(0.95 * times.length)] ?? 0, slowest: times.at(-1) ?? 0 }
}

async function answer(response) {
  const body = await response.json()
  if (!response.ok) throw new Error(`${response.status}: ${JSON.stringify(body).slice(0, 500)}`)
  return body.data
}

/** Imports the table, dry and for good, and again; `tell(what, value, limit, unit)` hears how that went. */
export async function benchImport({ base, pid, key }, tell) {
  const authorization = `Bearer ${key}`
  const post = async (path, body, headers = {}) => answer(await fetch(`${base}/api/v1${path}`, { method: 'POST', body, headers: { authorization, ...headers } }))
  const json = (body) => [JSON.stringify(body), { 'content-type': 'application/json' }]
  const amendment = await post('/amendments', ...json({ title: 'An invented table' }))
  await post(`/amendments/${amendment.id}/changes`, ...json({ kind: 'source', action: 'create', source: 'invented-levels', values: { citation: 'Invented for measuring', kind: 'other' } }))
  const file = new Blob([inventedTable(ROWS)], { type: 'text/csv' })
  const send = async (query) => {
    const form = new FormData()
    form.set('file', file, 'invented.csv')
    const made = await post(`/amendments/${amendment.id}/import${query}`, form)
    if (made.state !== 'done') throw new Error(made.summary)
    return made
  }
  const runs = [['dry run', '?dry_run=true', LIMITS.dryRun], ['commit', '', LIMITS.commit], ['the same file again', '', LIMITS.commit]]
  for (const [name, query, limit] of runs) {
    const run = await watched(pid, base, () => send(query))
    console.log(`       ${name}: ${run.value.summary} Other requests meanwhile: p95 ${run.p95.toFixed(0)} ms, slowest ${run.slowest.toFixed(0)} ms`)
    tell(`import of ${ROWS} rows, ${name}`, run.seconds, limit, ' s')
    tell(`resident memory of the server meanwhile`, run.megabytes, LIMITS.megabytes, ' MB')
  }
}
