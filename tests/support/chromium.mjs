// Debian's Chromium, which the browser tests drive: found, or installed where that is possible.
import { spawnSync } from 'node:child_process'
import fs from 'node:fs'
import { run, say, StepError } from '../../db/scripts/steps.mjs'

const CANDIDATES = [process.env.CHROMIUM, '/usr/bin/chromium', '/usr/bin/chromium-browser', '/usr/bin/google-chrome'].filter(Boolean)

/** Path of the browser; rejects with what to run where it is missing and this user cannot install it. */
export async function chromium() {
  const find = () => CANDIDATES.find((file) => fs.existsSync(file))
  const found = find()
  if (found) return found
  if (process.getuid() !== 0 || spawnSync('apt-get', ['--version']).status !== 0) {
    throw new StepError('Chromium is not installed, and the browser tests need it. Run:\n\n  sudo apt-get update && sudo apt-get install -y --no-install-recommends chromium\n\nand begin again; or set CHROMIUM to the path of one.')
  }
  say('installing the Debian package chromium')
  for (const args of [['update', '-q'], ['install', '-y', '-q', '--no-install-recommends', 'chromium']]) await run('apt-get', args, { env: { DEBIAN_FRONTEND: 'noninteractive' } })
  const installed = find()
  if (!installed) throw new StepError('Chromium is still not found after installing it; set CHROMIUM to its path')
  return installed
}
