// npm run backup [-- FILE]: the whole database into one file, by pg_dump, as it is at one moment; the server may go on running.
import fs from 'node:fs'
import path from 'node:path'
import { database, dataFolder, main, releaseDatabase, root, say, StepError } from './steps.mjs'
import { ask, tool } from './tools.mjs'

await main(async () => {
  const [given, ...rest] = process.argv.slice(2)
  if (rest.length > 0 || given?.startsWith('-')) throw new StepError('npm run backup [-- FILE]')
  const stamp = new Date().toISOString().slice(0, 19).replaceAll(':', '-')
  const file = given === undefined ? path.join(root, '.data/backups', `lodeterm-${stamp}.dump`) : path.resolve(process.env.INIT_CWD ?? '.', given)
  if (fs.existsSync(file)) throw new StepError(`${file} is there already; name another file`)
  if (given === undefined) dataFolder()
  fs.mkdirSync(path.dirname(file), { recursive: true })
  const { DATABASE_URL } = await database('lodeterm')
  const partial = `${file}.partial`
  // for its owner alone: it holds the hashes of passwords
  const out = fs.openSync(partial, 'w', 0o600)
  try {
    await tool('pg_dump', ['--format=custom', '--no-password'], DATABASE_URL, ['ignore', out]).ended
    fs.fsyncSync(out)
    fs.renameSync(partial, file)
  } catch (error) {
    fs.rmSync(partial, { force: true })
    throw error
  } finally {
    fs.closeSync(out)
  }
  const [{ editions }] = await ask(DATABASE_URL, 'select count(*)::integer as editions from editions')
  say(`backed up ${editions} edition${editions === 1 ? '' : 's'}, ${(fs.statSync(file).size / 1e6).toFixed(1)} MB`)
  process.stdout.write(`${file}\n`)
  await releaseDatabase()
})
