// Before npm start: from a bare clone to everything in place. Each step is skipped when there is nothing to do.
import fs from 'node:fs'
import path from 'node:path'
import { build, checkListen, checkNode, database, dataFolder, endWithChildren, install, main, migrate, root, say, seed, sessionSecret } from './steps.mjs'

endWithChildren()
await main(async () => {
  checkNode()
  await checkListen(process.env.HOST || '127.0.0.1', process.env.PORT || '3000')
  dataFolder()
  await install()
  sessionSecret(process.env.SESSION_SECRET_FILE || '.data/session-secret')
  const addresses = database('lodeterm')
  // A failure of the database is told after the build at the latest, not as an unhandled rejection before.
  addresses.catch(() => undefined)
  await build()
  const env = await addresses
  await migrate(env)
  const told = await seed({ ...env, DEMO_AMENDMENTS: '1' })
  // For serve.mjs, which prints it under the address.
  fs.writeFileSync(path.join(root, '.data/first-start'), told, { mode: 0o600 })
  say('ready')
})
