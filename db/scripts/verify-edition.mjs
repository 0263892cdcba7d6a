// npm run verify-edition -- N [--url ADDRESS] [--key KEY] | --database: only the last needs the project's database.
import { spawnSync } from 'node:child_process'
import { root } from './steps.mjs'

const args = process.argv.slice(2)
const before = args.includes('--database') ? ['db/scripts/run.mjs'] : ['--import', 'tsx']
const { status } = spawnSync(process.execPath, [...before, 'lib/curation/cli/verify-edition.ts', ...args], { cwd: root, stdio: 'inherit' })
process.exit(status ?? 1)
