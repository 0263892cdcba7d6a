// Runs a TypeScript command of the project with the database's addresses set: node db/scripts/run.mjs FILE.ts [arguments]
import { spawn } from 'node:child_process'
import { database, dataFolder, install, main, migrate, releaseDatabase, root, sessionSecret } from './steps.mjs'

const [file, ...rest] = process.argv.slice(2)
await main(async () => {
  dataFolder()
  await install()
  const env = { ...(await database('lodeterm')), SESSION_SECRET_FILE: sessionSecret(process.env.SESSION_SECRET_FILE || '.data/session-secret') }
  await migrate(env)
  const child = spawn(process.execPath, ['--import', 'tsx', file, ...rest], { cwd: root, stdio: 'inherit', env: { ...process.env, ...env } })
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, () => child.kill(signal))
  const code = await new Promise((done) => child.once('exit', (status) => done(status ?? 1)))
  await releaseDatabase()
  process.exit(code)
})
