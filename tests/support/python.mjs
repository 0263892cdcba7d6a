// Python with NumPy and SciPy, which the tests of the Python client need: found, or installed where that is possible.
import { spawnSync } from 'node:child_process'
import fs from 'node:fs'
import path from 'node:path'
import { run, say, StepError } from '../../db/scripts/steps.mjs'

const PACKAGES = ['python3', 'python3-numpy', 'python3-scipy']

/** Every python3 there is to try, the one named by PYTHON first. */
const candidates = () => [process.env.PYTHON, ...(process.env.PATH ?? '').split(':').map((folder) => path.join(folder, 'python3')), '/usr/bin/python3'].filter((file) => file && fs.existsSync(file))
const complete = (file) => spawnSync(file, ['-c', 'import sys, numpy, scipy.optimize; sys.exit(sys.version_info < (3, 9))'], { stdio: 'ignore' }).status === 0

/** Path of the interpreter; rejects with what to run where the packages are missing and this user cannot install them. */
export async function python() {
  const find = () => candidates().find(complete)
  const found = find()
  if (found) return found
  if (process.getuid() !== 0 || spawnSync('apt-get', ['--version']).status !== 0) {
    throw new StepError(`Python with NumPy and SciPy is not installed, and the tests of the Python client need it. Run:\n\n  sudo apt-get update && sudo apt-get install -y --no-install-recommends ${PACKAGES.join(' ')}\n\nand begin again; or set PYTHON to the path of one.`)
  }
  say(`installing the Debian packages ${PACKAGES.join(', ')}`)
  for (const args of [['update', '-q'], ['install', '-y', '-q', '--no-install-recommends', ...PACKAGES]]) await run('apt-get', args, { env: { DEBIAN_FRONTEND: 'noninteractive' } })
  const installed = find()
  if (!installed) throw new StepError('Python with NumPy and SciPy is still not found after installing the packages; set PYTHON to its path')
  return installed
}
