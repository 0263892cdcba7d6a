import { execFileSync, spawn, spawnSync } from 'node:child_process'
import fs from 'node:fs'
import net from 'node:net'
import os from 'node:os'
import path from 'node:path'
import pg from 'pg'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'

// A cluster of its own in a temporary folder, so that the one in use is left alone.
let home = ''
const script = path.resolve('db/scripts/pg.mjs')
const environment = () => ({ ...process.env, PG_HOME: home, PG_PORT: '56400' })
const run = (...args: string[]) => spawnSync(process.execPath, [script, ...args], { encoding: 'utf8', env: environment() })
const up = () => {
  const result = run('up', 'kept')
  if (result.status !== 0) throw new Error(result.stderr)
  return { url: result.stdout.trim(), said: result.stderr }
}
const ask = async (url: string, text: string) => {
  const client = new pg.Client({ connectionString: url })
  await client.connect()
  try {
    return (await client.query(text)).rows
  } finally {
    await client.end()
  }
}
const kept = (url: string) => ask(url, 'select value from keepsake')
const serverPid = () => Number(fs.readFileSync(path.join(home, 'cluster/postmaster.pid'), 'utf8').split('\n')[0])
const killServer = async () => {
  const pid = serverPid()
  process.kill(pid, 'SIGKILL')
  while (fs.existsSync(`/proc/${pid}/cmdline`) && fs.readFileSync(`/proc/${pid}/cmdline`, 'utf8') !== '') await new Promise((done) => setTimeout(done, 20))
}

beforeAll(async () => {
  home = fs.mkdtempSync(path.join(os.tmpdir(), 'lodeterm-cluster-'))
  fs.chmodSync(home, 0o755)
  await ask(up().url, "create table keepsake (value text); insert into keepsake values ('still here')")
})
afterAll(() => {
  run('down')
  fs.rmSync(home, { recursive: true, force: true })
})

describe('the private cluster', () => {
  it('keeps its passwords in a file that others cannot read', () => {
    expect(fs.statSync(path.join(home, 'state.json')).mode & 0o077).toBe(0)
    expect(fs.statSync(path.join(home, 'cluster')).mode & 0o077).toBe(0)
  })

  it('asks for a password, and gives the owner and the application no more than they need', async () => {
    const wrong = new URL(up().url)
    wrong.password = 'wrong'
    await expect(kept(wrong.toString())).rejects.toMatchObject({ code: '28P01' })
    expect(await ask(up().url, 'select rolname, rolsuper, rolcreaterole, rolcreatedb from pg_roles where rolname in (\'lodeterm_owner\', \'lodeterm_app\') order by 1')).toEqual([
      { rolname: 'lodeterm_app', rolsuper: false, rolcreaterole: false, rolcreatedb: false },
      { rolname: 'lodeterm_owner', rolsuper: false, rolcreaterole: false, rolcreatedb: false },
    ])
    const app = run('url', 'kept', '--app').stdout.trim()
    expect(await ask(app, 'select current_user as name')).toEqual([{ name: 'lodeterm_app' }])
    await expect(kept(app)).rejects.toMatchObject({ code: '42501' })
  })

  it('is started once, however often it is asked', () => {
    const pid = serverPid()
    up()
    expect(serverPid()).toBe(pid)
  })

  it('never shows a password on a command line', () => {
    const { password } = new URL(up().url)
    const lines = fs.readdirSync('/proc').filter((name) => /^\d+$/.test(name)).map((pid) => {
      try {
        return fs.readFileSync(`/proc/${pid}/cmdline`, 'utf8')
      } catch {
        return ''
      }
    })
    expect(password.length).toBeGreaterThan(20)
    expect(lines.filter((line) => line.includes(password))).toEqual([])
  })
})

describe('losing the state file never deletes data', () => {
  it('keeps them while the server runs, and sets new passwords', async () => {
    const before = up().url
    fs.rmSync(path.join(home, 'state.json'))
    const { url, said } = up()
    expect(said).toContain('the data in')
    expect(new URL(url).password).not.toBe(new URL(before).password)
    expect(await kept(url)).toEqual([{ value: 'still here' }])
  })

  it('keeps them while it is stopped, killed, or the file is damaged', async () => {
    run('down')
    fs.rmSync(path.join(home, 'state.json'))
    expect(await kept(up().url)).toEqual([{ value: 'still here' }])
    await killServer()
    fs.rmSync(path.join(home, 'state.json'))
    expect(await kept(up().url)).toEqual([{ value: 'still here' }])
    fs.writeFileSync(path.join(home, 'state.json'), '{"port"')
    expect(await kept(up().url)).toEqual([{ value: 'still here' }])
  })

  it('keeps them when the file is of another cluster', async () => {
    const state = JSON.parse(fs.readFileSync(path.join(home, 'state.json'), 'utf8'))
    fs.writeFileSync(path.join(home, 'state.json'), JSON.stringify({ ...state, passwords: { superuser: 'a', owner: 'b', app: 'c' } }))
    expect(await kept(up().url)).toEqual([{ value: 'still here' }])
  })
})

describe('what a killed server leaves behind', () => {
  it('a pid file of a dead process', async () => {
    await killServer()
    expect(await kept(up().url)).toEqual([{ value: 'still here' }])
  })

  it('a pid file whose number another program now has', async () => {
    const file = path.join(home, 'cluster/postmaster.pid')
    const text = fs.readFileSync(file, 'utf8')
    const { uid, gid } = fs.statSync(file)
    run('down')
    const other = spawn('sleep', ['120'], { stdio: 'ignore' })
    try {
      fs.writeFileSync(file, text.replace(/^\d+/, String(other.pid)), { mode: 0o600 })
      fs.chownSync(file, uid, gid)
      expect(await kept(up().url)).toEqual([{ value: 'still here' }])
      expect(other.exitCode).toBeNull()
    } finally {
      other.kill()
    }
  })

  it('a busy backend that lives on', async () => {
    const busy = new pg.Client({ connectionString: up().url })
    busy.on('error', () => undefined)
    await busy.connect()
    const query = busy.query('select count(*) from generate_series(1, 100000000000)').catch((error: unknown) => error)
    await new Promise((done) => setTimeout(done, 300))
    await killServer()
    expect(await kept(up().url)).toEqual([{ value: 'still here' }])
    expect(await query).toBeInstanceOf(Error)
  })
})

describe('surroundings', () => {
  it('takes the next port, and says so, when its own is in use', async () => {
    const before = Number(new URL(up().url).port)
    run('down')
    const other = net.createServer()
    await new Promise<void>((done) => other.listen(before, '127.0.0.1', done))
    try {
      const started = spawn(process.execPath, [script, 'up', 'kept'], { env: environment(), stdio: ['ignore', 'pipe', 'pipe'] })
      let [out, said] = ['', '']
      started.stdout.on('data', (chunk) => (out += chunk))
      started.stderr.on('data', (chunk) => (said += chunk))
      expect(await new Promise((done) => started.on('close', done))).toBe(0)
      expect(said).toContain(`port ${before} is in use`)
      expect(Number(new URL(out.trim()).port)).not.toBe(before)
      expect(await kept(out.trim())).toEqual([{ value: 'still here' }])
    } finally {
      await new Promise((done) => other.close(done))
    }
  })

  it('makes tests a new database, and refuses to drop any other', async () => {
    const first = run('fresh', 'kept_test').stdout.trim()
    await ask(first, 'create table gone (x int)')
    await expect(ask(run('fresh', 'kept_test').stdout.trim(), 'select * from gone')).rejects.toMatchObject({ code: '42P01' })
    const refused = run('fresh', 'kept')
    expect(refused.status).toBe(1)
    expect(refused.stderr).toContain('not a test database')
    expect(await kept(up().url)).toEqual([{ value: 'still here' }])
  })

  it('stops on request only when nobody is connected', async () => {
    const someone = new pg.Client({ connectionString: up().url })
    await someone.connect()
    expect(run('down', '--if-idle').stderr).toContain('others are connected')
    await someone.end()
    // The server needs a moment to see that the connection is gone.
    await new Promise((done) => setTimeout(done, 200))
    expect(run('down', '--if-idle').stderr).toContain('stopped')
    expect(JSON.parse(execFileSync(process.execPath, [script, 'status'], { encoding: 'utf8', env: environment() }))).toEqual({ home })
  })
})
