// Measures bulk predictions over HTTP against the same sums in NumPy, the memory of a large answer and small requests beside large ones; ends
// with 1 where a promise is broken. Run with tsx; BENCH_BASE, BENCH_PID and BENCH_KEY name the server.
import { spawn, spawnSync } from 'node:child_process'
import fs from 'node:fs'
import path from 'node:path'
import { fieldTerm, landeG, MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic'
import { askWhole, decodeArrow, decodeJson } from './bulk-client.mjs'
import { Connection, median } from './measure.mjs'

const { BENCH_BASE: base, BENCH_PID: pid, BENCH_KEY: key } = process.env
const ROUNDS = Number(process.env.BENCH_ROUNDS ?? 7)
const LIMITS = { linearArrow: 0.1, linearJson: 0.005, eigenpairs: 1, memoryMb: 200, p95: 3, single: 2 }

const broken = []
function tell(what, value, limit, { atLeast = false, unit = '' } = {}) {
  const kept = atLeast ? value >= limit : value <= limit
  if (!kept) broken.push(what)
  console.log(`${kept ? 'kept  ' : 'BROKEN'} ${what}: ${value.toPrecision(3)}${unit} (at ${atLeast ? 'least' : 'most'} ${limit}${unit})`)
}

// ---- the questions

const levels = (twoS, l, energies) => Object.entries(energies).map(([j, energy]) => ({ energy_invcm: energy, s: twoS / 2, l, j: Number(j), parity: l % 2 === 0 ? 'even' : 'odd' }))
const PAIRS = {
  'doublet 2S-2P': { twoS: 1, lower: levels(1, 0, { 0.5: 0 }), upper: levels(1, 1, { 0.5: 14_903.66, 1.5: 14_904 }), count: 100_000 },
  'quintet 5D-5F': { twoS: 4, lower: levels(4, 2, { 0: 978, 1: 888, 2: 704, 3: 416, 4: 0 }), upper: levels(4, 3, { 1: 27_666, 2: 27_560, 3: 27_395, 4: 27_167, 5: 26_875 }), count: 8000 },
}
const field = (count) => ({ start: 0.01, stop: 10, count, unit: 'T' })
const termOf = (twoS, list) => fieldTerm({ twoS, l: list[0].l, levels: list.map((level) => ({ twoJ: 2 * level.j, energyInvcm: level.energy_invcm, g: landeG({ twoS, l: level.l, twoJ: 2 * level.j }) })) })

/** Two D lines of sodium, ten components, as linear laws; what NumPy is given comes from the server itself. */
const D_LINES = [{ transition: 'Na-I.1~Na-I.3' }, { transition: 'Na-I.1~Na-I.2' }]
const linear = (count) => ({ lines: D_LINES, field: field(count), model: 'linear', strengths: false })
const LINEAR_COUNT = 500_000
const JSON_COUNT = 100_000

async function numpy() {
  const { decoded } = await askWhole(base, '/api/v1/predictions', { ...linear(1), derivatives: true }, key, (pieces) => JSON.parse(Buffer.concat(pieces).toString()).data)
  const slopes = decoded.flatMap((block) => block.derivatives[0])
  const centres = decoded.flatMap((block) => block.values[0].map((value, c) => value - 0.01 * block.derivatives[0][c]))
  const terms = Object.entries(PAIRS).map(([name, { twoS, lower, upper, count }]) => ({
    name, count, start: 0.01 * MU_B_OVER_HC_INVCM_PER_T, stop: 10 * MU_B_OVER_HC_INVCM_PER_T,
    blocks: [termOf(twoS, lower), termOf(twoS, upper)].flatMap((term) => term.blocks.map((block) => ({ diagonal: [...block.diagonal], slopes: [...block.slopes], couplings: [...block.couplings].slice(0, block.n - 1) }))),
  }))
  const question = { rounds: ROUNDS, linear: { centres, slopes, start: 0.01, stop: 10, count: LINEAR_COUNT }, terms }
  // Debian's interpreter has Debian's NumPy, whatever python3 the path finds first
  const python = ['/usr/bin/python3', 'python3'].find((program) => spawnSync(program, ['-c', 'import numpy']).status === 0)
  if (python === undefined) throw new Error('no python3 with NumPy was found (Debian: python3-numpy)')
  return () => {
    const run = spawnSync(python, [path.join(import.meta.dirname, 'bulk.py')], { input: JSON.stringify(question), maxBuffer: 1 << 26, stdio: ['pipe', 'pipe', 'inherit'] })
    return JSON.parse(run.stdout.toString())
  }
}

// ---- answers against NumPy

async function median3(work) {
  await work()
  const times = []
  for (let i = 0; i < ROUNDS; i += 1) times.push(await work())
  return median(times)
}

async function speeds() {
  const inNumpy = await numpy()
  // before and after, so that what disturbs the machine for a while disturbs both
  const before = inNumpy()
  const arrowMs = await median3(async () => (await askWhole(base, '/api/v1/predictions?format=arrow', linear(LINEAR_COUNT), key, decodeArrow)).ms)
  const jsonMs = await median3(async () => (await askWhole(base, '/api/v1/predictions', linear(JSON_COUNT), key, decodeJson)).ms)
  const pairs = {}
  for (const [name, { lower, upper, count }] of Object.entries(PAIRS)) {
    const body = { multiplets: [{ lower, upper }], field: field(count), model: 'intermediate', derivatives: true }
    pairs[name] = await median3(async () => (await askWhole(base, '/api/v1/predictions?format=arrow', body, key, decodeArrow)).ms)
  }
  const after = inNumpy()
  const seconds = (part) => (part(before).wall + part(after).wall) / 2
  const linearNumpy = (LINEAR_COUNT * 10) / seconds((answer) => answer.linear)
  const rate = (values, ms) => values / (ms / 1000)
  console.log(`       NumPy ${before.numpy}: ${(linearNumpy / 1e6).toFixed(1)} million linear values a second; over HTTP ${(rate(LINEAR_COUNT * 10, arrowMs) / 1e6).toFixed(1)} in Arrow, ${(rate(JSON_COUNT * 10, jsonMs) / 1e6).toFixed(2)} in JSON`)
  tell('linear values over HTTP in Arrow, decoded, over NumPy', rate(LINEAR_COUNT * 10, arrowMs) / linearNumpy, LIMITS.linearArrow, { atLeast: true })
  tell('linear values over HTTP in JSON, decoded, over NumPy', rate(JSON_COUNT * 10, jsonMs) / linearNumpy, LIMITS.linearJson, { atLeast: true })
  for (const [name, { twoS, lower, upper, count }] of Object.entries(PAIRS)) {
    const states = termOf(twoS, lower).states + termOf(twoS, upper).states
    const own = rate(states * count, pairs[name])
    const theirs = (states * count) / seconds((answer) => answer.terms[name])
    console.log(`       ${name}: ${(own / 1e6).toFixed(2)} million eigenpairs a second over HTTP with strengths and derivatives, NumPy's eigh alone ${(theirs / 1e6).toFixed(2)}`)
    tell(`eigenpairs of ${name} over HTTP, over NumPy`, own / theirs, LIMITS.eigenpairs, { atLeast: true })
  }
}

// ---- memory

const rssMb = () => Number(/VmRSS:\s+(\d+)/.exec(fs.readFileSync(`/proc/${pid}/status`, 'utf8'))[1]) / 1024

async function memory() {
  const { lower, upper } = PAIRS['doublet 2S-2P']
  const questions = {
    'linear, values only': linear(500_000),
    'linear, with derivatives and strengths': { ...linear(500_000), derivatives: true, strengths: true },
    'intermediate, with derivatives and strengths': { multiplets: [{ lower, upper }], field: field(500_000), model: 'intermediate', derivatives: true },
    // J = 2 and 3, fifteen components, of two whole terms of the table: a line shows one state of each m block, and these have up to five
    'intermediate, one line of quintets': { lines: [{ transition: 'Fe-I.3~Fe-I.22' }], field: field(333_333), model: 'intermediate', derivatives: true },
  }
  for (const [name, body] of Object.entries(questions)) {
    // twice before: the first of its kind compiles and starts what later ones find there
    for (let i = 0; i < 2; i += 1) await askWhole(base, '/api/v1/predictions?format=arrow', { ...body, field: field(1000) }, key, null)
    await new Promise((done) => setTimeout(done, 1500))
    const idle = rssMb()
    let most = idle
    const timer = setInterval(() => (most = Math.max(most, rssMb())), 10)
    await askWhole(base, '/api/v1/predictions?format=arrow', body, key, null)
    clearInterval(timer)
    tell(`memory of 5 million values in Arrow above idle, ${name}`, most - idle, LIMITS.memoryMb, { unit: ' MB' })
  }
}

// ---- small requests beside large ones

const percentile95 = (list) => [...list].sort((a, b) => a - b)[Math.floor(list.length * 0.95)]

async function beside() {
  const connection = new Connection(base)
  const { lower, upper } = PAIRS['doublet 2S-2P']
  const single = { get path() { return `/api/v1/transitions/Na-I.1~Na-I.3/components?field=${1 + Math.random()}T` }, headers: { authorization: `Bearer ${key}` } }
  const measure = async (count) => {
    const times = []
    for (let i = 0; i < count; i += 1) times.push(await connection.time(single))
    return percentile95(times)
  }
  await measure(500)
  const quiet = [await measure(1000)]
  const body = JSON.stringify({ multiplets: [{ lower, upper }], field: field(500_000), model: 'intermediate', derivatives: true })
  const load = spawn(process.execPath, [path.join(import.meta.dirname, 'bulk-client.mjs'), 'load'], { env: { ...process.env, BENCH_BODY: body }, stdio: ['ignore', 'pipe', 'inherit'] })
  await new Promise((resolve) => load.stdout.once('data', resolve))
  const loaded = await measure(2000)
  load.kill()
  await new Promise((done) => setTimeout(done, 1500))
  quiet.push(await measure(1000))
  connection.close()
  const best = Math.min(...quiet)
  console.log(`       p95 of a single-line request: ${best.toFixed(2)} ms quiet, ${loaded.toFixed(2)} ms beside large ones`)
  tell('p95 of a single-line request beside large ones, over its quiet value', loaded / best, LIMITS.p95)
}

await speeds()
await memory()
await beside()
if (broken.length > 0) process.exitCode = 1
