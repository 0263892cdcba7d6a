// npm run bench: what the server promises about its speed, as ratios and percentiles measured in one run.
import { spawn } from 'node:child_process'
import fs from 'node:fs'
import path from 'node:path'
import { build, database, endServer, freePort, main, migrate, node, releaseDatabase, root, run, say, seed, serve, sessionSecret } from '../../db/scripts/steps.mjs'
import { Connection, median, scriptBytes } from './measure.mjs'

const folder = path.join(root, '.data/bench')
const APP = 'tests/bench/next'
const ROUNDS = 3000
const WARM_UP = 1000

const LIMITS = { wrapper: 1.3, components: 1.5, intermediate: 2, scriptKb: 200 }

/** A database of its own, seeded, and limits that no measurement meets. */
async function environment() {
  delete process.env.DATABASE_URL
  delete process.env.DATABASE_APP_URL
  fs.mkdirSync(folder, { recursive: true })
  const env = {
    ...(await database('lodeterm_test_bench', { fresh: true })),
    DEMO: '1',
    DEMO_ACCOUNTS_FILE: path.join(folder, 'demo-accounts.json'),
    SESSION_SECRET_FILE: sessionSecret(path.join(folder, 'session-secret')),
    BASE_URL: 'http://127.0.0.1:3000',
    LOG_LEVEL: 'warn',
    RATE_ANONYMOUS_PER_MINUTE: '10000000',
    RATE_KEY_PER_MINUTE: '10000000',
  }
  await migrate(env)
  await seed(env)
  return env
}

const makeKey = async (env, role = 'reader') => (await node(['--import', 'tsx', 'lib/access/cli/key.ts', '--role', role, '--name', 'bench', ...(role === 'reader' ? [] : ['--owner', `${role}@lodeterm.example`])], { env, capture: true })).match(/ldt_\S+/)[0]

/** The three route handlers that are compared live in a small application of their own: a bare one has no place in the product. */
async function serveRoutes(env) {
  await run(process.execPath, ['node_modules/next/dist/bin/next', 'build', APP], { env: { NODE_ENV: 'production', NEXT_TELEMETRY_DISABLED: '1' }, quiet: true })
  const port = await freePort()
  const child = spawn(process.execPath, ['node_modules/next/dist/bin/next', 'start', APP, '-H', '127.0.0.1', '-p', port], {
    cwd: root, stdio: ['ignore', 2, 2], env: { ...process.env, ...env, HOST: '127.0.0.1', PORT: port, NODE_ENV: 'production', NEXT_TELEMETRY_DISABLED: '1' },
  })
  const base = `http://127.0.0.1:${port}`
  for (let i = 0; i < 300; i++) {
    const answer = await fetch(`${base}/api/v1/bare`).catch(() => undefined)
    await answer?.arrayBuffer()
    if (answer?.ok) return { child, base }
    await new Promise((done) => setTimeout(done, 100))
  }
  child.kill('SIGKILL')
  throw new Error('the routes to measure did not answer')
}

/** Medians on one connection, one request of each in turn: what disturbs the machine disturbs all alike. */
async function compareRoutes(env, key) {
  const { child, base } = await serveRoutes(env)
  const connection = new Connection(base)
  try {
    const authorization = `Bearer ${key}`
    const routes = {
      bare: { path: '/api/v1/bare', headers: {} },
      constant: { path: '/api/v1/constant', headers: { authorization } },
      components: { path: '/api/v1/transitions/Na-I.1~Na-I.3/components?field=1.5T', headers: { authorization } },
      // never asked before, so computed and written anew each time
      intermediate: { get path() { return `/api/v1/transitions/Na-I.1~Na-I.3/components?model=intermediate&field=${1 + Math.random()}T` }, headers: { authorization } },
      anew: { get path() { return `/api/v1/transitions/Na-I.1~Na-I.3/components?field=${1 + Math.random()}T` }, headers: { authorization } },
    }
    for (const route of Object.values(routes)) for (let i = 0; i < WARM_UP; i++) await connection.time(route)
    const times = Object.fromEntries(Object.keys(routes).map((name) => [name, []]))
    for (let round = 0; round < ROUNDS; round++) {
      for (const [name, route] of Object.entries(routes)) times[name].push(await connection.time(route))
    }
    return Object.fromEntries(Object.entries(times).map(([name, list]) => [name, median(list)]))
  } finally {
    connection.close()
    await endServer(child)
  }
}

/** Compressed script that the first page of the built product asks for. */
async function firstPage(env) {
  await build()
  const { child, base } = await serve('127.0.0.1', await freePort(), env)
  try {
    return await scriptBytes(base, '/')
  } finally {
    await endServer(child)
  }
}

/** Bulk predictions by the built product against NumPy, their memory, and small requests beside them. */
async function bulkPredictions(env) {
  await build()
  const { child, base } = await serve('127.0.0.1', await freePort(), env)
  try {
    await node(['--import', 'tsx', 'tests/bench/bulk.mjs'], { env: { BENCH_BASE: base, BENCH_PID: String(child.pid), BENCH_KEY: await makeKey(env) } })
  } finally {
    await endServer(child)
  }
}

/** A large table imported into the built product. */
async function importTable(env) {
  await build()
  const { child, base } = await serve('127.0.0.1', await freePort(), env)
  try {
    await node(['--import', 'tsx', 'tests/bench/import.mjs'], { env: { BENCH_BASE: base, BENCH_PID: String(child.pid), BENCH_KEY: await makeKey(env, 'curator') } })
  } finally {
    await endServer(child)
  }
}

await main(async () => {
  const broken = []
  const tell = (what, value, limit, unit = '') => {
    const kept = value <= limit
    if (!kept) broken.push(what)
    console.log(`${kept ? 'kept  ' : 'BROKEN'} ${what}: ${value.toFixed(2)}${unit} (at most ${limit}${unit})`)
  }
  const env = await environment()
  // npm run bench -- bulk measures that alone
  if (process.argv.includes('bulk')) {
    await bulkPredictions(env).catch((error) => broken.push(`bulk (${error.message})`))
    await releaseDatabase()
    if (broken.length > 0) process.exitCode = 1
    return
  }
  const key = await makeKey(env)
  say('comparing routes')
  const medians = await compareRoutes(env, key)
  console.log(`medians on one connection: bare handler ${medians.bare.toFixed(3)} ms, constant answer ${medians.constant.toFixed(3)} ms, components ${medians.components.toFixed(3)} ms, components at a new field each time ${medians.anew.toFixed(3)} ms`)
  tell('constant answer through the wrapper, over a bare route handler', medians.constant / medians.bare, LIMITS.wrapper)
  tell('components of one line with a key, over a constant answer', medians.components / medians.constant, LIMITS.components)
  tell('intermediate components of one line at a field never asked before, over a bare route handler', medians.intermediate / medians.bare, LIMITS.intermediate)
  console.log(`       the same at a field never asked before: ${(medians.anew / medians.constant).toFixed(2)}`)
  say('searching an invented edition of 100 species with 1000 levels each')
  await node(['--import', 'tsx', 'tests/bench/search.mjs']).catch(() => broken.push('search'))
  say('publishing and comparing editions of 100 000 levels')
  const editions = { ...env, ...(await database('lodeterm_editions_test_bench', { fresh: true })) }
  await migrate(editions)
  await seed(editions)
  await node(['--import', 'tsx', 'tests/bench/editions.mjs'], { env: editions }).catch(() => broken.push('editions'))
  say('bulk predictions against NumPy')
  await bulkPredictions(env).catch((error) => broken.push(`bulk (${error.message})`))
  say('importing a table of 100 000 rows')
  await importTable(env).catch((error) => broken.push(`import (${error.message})`))
  say('weighing the first page')
  const { files, bytes } = await firstPage(env)
  tell(`script of the first page, ${files} files, gzip`, bytes / 1000, LIMITS.scriptKb, ' kB')
  await releaseDatabase()
  if (broken.length > 0) {
    console.log(`\nnot kept: ${broken.join('; ')}`)
    process.exitCode = 1
  }
})
