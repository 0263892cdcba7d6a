// The steps from a bare clone to a served table, each skipped when there is nothing to do. Used by npm start and npm test.
// No dependencies: it runs before npm has installed anything.
import { spawn } from 'node:child_process'
import { createHash, randomBytes } from 'node:crypto'
import fs from 'node:fs'
import net from 'node:net'
import path from 'node:path'
import { fileURLToPath } from 'node:url'

export const root = path.resolve(path.dirname(fileURLToPath(import.meta.url)), '../..')
export class StepError extends Error {}

const started = performance.now()
const seconds = (since) => `${((performance.now() - since) / 1000).toFixed(1)} s`
export const say = (message) => process.stderr.write(`[${seconds(started).padStart(7)}] ${message}\n`)

// ---- running programs; a signal to this one ends them too

const children = new Set()
let ending = false
/** Lets a signal end this program and whatever it has started. */
export function endWithChildren() {
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) {
    process.on(signal, () => {
      if (ending) return
      ending = true
      for (const child of children) child.kill(signal === 'SIGINT' ? 'SIGTERM' : signal)
      setTimeout(() => process.exit(130), 3000).unref()
      if (children.size === 0) process.exit(130)
      for (const child of children) child.once('exit', () => children.size === 0 && process.exit(130))
    })
  }
}

/**
 * Runs a program and resolves to what it wrote to its standard output, which otherwise goes to standard error.
 * Rejects with StepError when it ends with anything but 0.
 */
export function run(command, args, { env = {}, capture = false, quiet = false } = {}) {
  return new Promise((resolve, reject) => {
    const child = spawn(command, args, { cwd: root, stdio: ['ignore', capture || quiet ? 'pipe' : 2, quiet ? 'pipe' : 2], env: { ...process.env, NEXT_TELEMETRY_DISABLED: '1', ...env } })
    children.add(child)
    let output = ''
    let errors = ''
    child.stdout?.on('data', (chunk) => { output += chunk })
    child.stderr?.on('data', (chunk) => { errors += chunk })
    child.on('error', (error) => reject(new StepError(`${command} could not be run: ${error.message}`)))
    child.on('close', (code, signal) => {
      children.delete(child)
      if (code === 0) resolve(output.trim())
      else reject(new StepError(`${quiet ? `${output}${errors}\n` : ''}${path.basename(command)} ${args.join(' ')} ended with ${signal ?? code}`))
    })
  })
}
export const node = (args, options) => run(process.execPath, args, options)

// ---- checks before anything is done

export function checkNode() {
  const [major, minor] = process.versions.node.split('.').map(Number)
  if (major < 20 || (major === 20 && minor < 19)) throw new StepError(`Node.js 20.19 or newer is needed; this is ${process.version}`)
}

/** Resolves when a server may listen there; rejects with what is in the way and how to go on. */
export function checkListen(host, port) {
  if (!/^\d{1,5}$/.test(port) || Number(port) < 1 || Number(port) > 65_535) throw new StepError(`PORT=${port} is no port: a number from 1 to 65535 is meant`)
  const why = {
    EADDRINUSE: `port ${port} on ${host} is in use by another program (perhaps a server of this project that still runs). Stop it, or choose another port: PORT=${Number(port) + 1} npm start`,
    EACCES: `port ${port} may not be used by this user; choose one above 1023, such as PORT=3000 npm start`,
    EADDRNOTAVAIL: `HOST=${host} is no address of this machine; leave it out for 127.0.0.1, or use 0.0.0.0 for all addresses`,
    ENOTFOUND: `HOST=${host} is not known; leave it out for 127.0.0.1, or use 0.0.0.0 for all addresses`,
  }
  return new Promise((resolve, reject) => {
    const probe = net.createServer()
    probe.once('error', (error) => reject(new StepError(why[error.code] ?? `cannot listen on ${host}:${port}: ${error.message}`)))
    probe.listen(Number(port), host, () => probe.close(() => resolve()))
  })
}

/** Makes the private data folder, or says whose it is. */
export function dataFolder() {
  const folder = path.join(root, '.data')
  try {
    fs.mkdirSync(folder, { recursive: true })
    fs.accessSync(folder, fs.constants.W_OK)
  } catch (error) {
    throw new StepError(`${folder} cannot be written to (${error.code}): it belongs to whoever ran this project before. Run as that user, or work in a clone of your own.`)
  }
}

// ---- installing

/** Whether node_modules holds what the lock asks for, by npm's own record of what it installed (written last). */
function installed() {
  try {
    const wanted = JSON.parse(fs.readFileSync(path.join(root, 'package-lock.json'), 'utf8')).packages
    const present = JSON.parse(fs.readFileSync(path.join(root, 'node_modules/.package-lock.json'), 'utf8')).packages
    return Object.entries(wanted).every(([name, entry]) => name === '' || entry.optional || entry.devOptional || present[name]?.version === entry.version)
  } catch { return false }
}

export async function install() {
  if (installed()) return
  const from = performance.now()
  say('installing packages from the lock (npm ci)')
  // --include=dev: the build needs the development packages, whatever NODE_ENV says.
  await run('npm', ['ci', '--include=dev', '--no-audit', '--no-fund'], { env: { NODE_ENV: 'development' } })
  say(`installed in ${seconds(from)}`)
}

// ---- database

/** The addresses of the database: those given, or those of the private cluster, which is made and started first. */
export async function database(name, { fresh = false } = {}) {
  if (process.env.DATABASE_URL) return { DATABASE_URL: process.env.DATABASE_URL, ...(process.env.DATABASE_APP_URL ? { DATABASE_APP_URL: process.env.DATABASE_APP_URL } : {}) }
  const DATABASE_URL = await node(['db/scripts/pg.mjs', fresh ? 'fresh' : 'up', name], { capture: true })
  const DATABASE_APP_URL = await node(['db/scripts/pg.mjs', 'url', name, '--app'], { capture: true })
  return { DATABASE_URL, DATABASE_APP_URL }
}

/** Stops the private cluster unless somebody still uses it. */
export const releaseDatabase = () => (process.env.DATABASE_URL ? undefined : node(['db/scripts/pg.mjs', 'down', '--if-idle'], { quiet: true }).catch(() => undefined))

export const migrate = (env) => node(['db/scripts/migrate.mjs'], { env })

/** Loads the first edition where the table is empty, and sets the demo accounts; resolves to what it has to say. */
export const seed = (env) => node(['--import', 'tsx', 'seeds/run.ts'], { env, capture: true })

// ---- build

const BUILT_FROM = ['app', 'db', 'lib', 'openapi', 'public', 'package-lock.json', 'next.config.ts', 'postcss.config.mjs', 'tailwind.config.ts', 'tsconfig.json', 'instrumentation.ts', 'proxy.ts']
const NOT_BUILT = /^db\/(scripts|migrations)\//
const STAMP = path.join(root, '.next/sources-stamp')

function filesUnder(name) {
  const full = path.join(root, name)
  if (!fs.existsSync(full)) return []
  if (!fs.statSync(full).isDirectory()) return [name]
  return fs.readdirSync(full).flatMap((entry) => filesUnder(path.join(name, entry)))
}
/** A hash over every file that the build reads. */
export function sourcesStamp() {
  const hash = createHash('sha256')
  for (const file of BUILT_FROM.flatMap(filesUnder).filter((f) => !NOT_BUILT.test(f)).sort()) {
    hash.update(file).update('\0').update(fs.readFileSync(path.join(root, file))).update('\0')
  }
  return hash.digest('hex')
}
export const isBuilt = () => fs.existsSync(path.join(root, '.next/BUILD_ID')) && fs.existsSync(STAMP) && fs.readFileSync(STAMP, 'utf8') === sourcesStamp()

/** Builds when the sources differ from those of the last build; one build at a time. */
export async function build() {
  if (isBuilt()) return
  const from = performance.now()
  say('building')
  dataFolder()
  await run('flock', ['-o', path.join(root, '.data/build.lock'), process.execPath, 'db/scripts/build.mjs'], { env: { NODE_ENV: 'production' } })
  say(`built in ${seconds(from)}`)
}

/** Under the lock of `build`. The stamp is of the sources as they were when the build began. */
export async function buildNow() {
  if (isBuilt()) return
  const stamp = sourcesStamp()
  fs.rmSync(STAMP, { force: true })
  await node(['node_modules/next/dist/bin/next', 'build'])
  fs.writeFileSync(STAMP, stamp)
}

// ---- secrets

/** Makes the private file that session cookies are signed with, once. Returns its path. */
export function sessionSecret(file) {
  const full = path.resolve(root, file)
  fs.mkdirSync(path.dirname(full), { recursive: true })
  try {
    fs.writeFileSync(full, `${randomBytes(48).toString('base64url')}\n`, { mode: 0o600, flag: 'wx' })
  } catch (error) {
    if (error.code !== 'EEXIST') throw error
  }
  return full
}

// ---- mail

const LOOPBACK = /^(localhost|::1|127(\.\d{1,3}){3})$/
const yes = (text) => /^(1|true|yes|on)$/i.test(text ?? '')

/**
 * Whether mail is kept here for want of a mail server: only where demo accounts are allowed. Elsewhere it waits for a mail server: behind
 * a proxy a real instance is on loopback too, and links that set passwords must not lie about in a folder.
 */
export const keepsMail = (host) => !process.env.SMTP_URL && (process.env.DEMO ? yes(process.env.DEMO) : LOOPBACK.test(host))

/**
 * Starts the stand-in for a mail server on a free port of loopback; resolves to its process and what the web server has to be told.
 * It ends with this program, whatever ends that.
 */
export function mailStandIn(folder) {
  const outbox = path.resolve(root, folder)
  const child = spawn(process.execPath, ['lib/mail/fake.mjs', outbox], { cwd: root, stdio: ['pipe', 'pipe', 2] })
  return new Promise((resolve, reject) => {
    let output = ''
    child.on('error', (error) => reject(new StepError(`the stand-in for a mail server could not be run: ${error.message}`)))
    child.once('exit', (code, signal) => reject(new StepError(`the stand-in for a mail server ended with ${signal ?? code}`)))
    child.stdin.on('error', () => undefined)
    child.stdout.on('data', (chunk) => {
      output += chunk
      if (/^\d+\n/.test(output)) resolve({ child, env: { SMTP_URL: `smtp://127.0.0.1:${output.trim()}`, OUTBOX_FOLDER: outbox } })
    })
  })
}

// ---- serving

/** Starts the built server and resolves to its process once it answers; rejects when it ends before. */
export async function serve(host, port, env) {
  const given = { ...process.env, ...env, HOST: host, PORT: port, NODE_ENV: 'production', NEXT_TELEMETRY_DISABLED: '1' }
  // The server is not handed the owner's login where it has one of its own.
  if (given.DATABASE_APP_URL) delete given.DATABASE_URL
  const child = spawn(process.execPath, ['node_modules/next/dist/bin/next', 'start', '-H', host, '-p', port], {
    cwd: root, stdio: ['ignore', 2, 2], env: given,
  })
  let ended
  child.once('exit', (code, signal) => { ended = signal ?? code })
  const name = host === '0.0.0.0' ? '127.0.0.1' : host === '::' ? '[::1]' : host.includes(':') ? `[${host}]` : host
  const base = `http://${name}:${port}`
  for (let i = 0; i < 600; i++) {
    if (ended !== undefined) throw new StepError(`the server ended at once (${ended})`)
    // a machine that has much to do answers late, and in the middle of an answer too
    const answer = await fetch(`${base}/api/v1/health/live`, { signal: AbortSignal.timeout(5_000) }).then(async (response) => ({ ok: response.ok, body: await response.arrayBuffer() })).catch(() => undefined)
    if (answer?.ok) return { child, base }
    await new Promise((done) => setTimeout(done, 100))
  }
  child.kill('SIGKILL')
  throw new StepError(`the server did not answer at ${base}/api/v1/health/live within a minute`)
}

/** Ends a server gently, then firmly. */
export function endServer(child) {
  if (child.exitCode !== null || child.signalCode !== null) return Promise.resolve()
  return new Promise((done) => {
    const timer = setTimeout(() => child.kill('SIGKILL'), 10_000)
    child.once('exit', () => { clearTimeout(timer); done() })
    child.kill('SIGTERM')
  })
}

/** Runs the body, and prints what a StepError says instead of a stack. */
export async function main(body) {
  try {
    await body()
  } catch (error) {
    if (!(error instanceof StepError)) throw error
    process.stderr.write(`\n${error.message}\n`)
    process.exit(1)
  }
}

/** A port that is free now. */
export const freePort = () => new Promise((resolve, reject) => {
  const probe = net.createServer().once('error', reject)
  probe.listen(0, '127.0.0.1', () => {
    const { port } = probe.address()
    probe.close(() => resolve(String(port)))
  })
})
