// npm test: everything, from a bare clone. Arguments go to vitest (npm test -- --project unit).
import fs from 'node:fs'
import path from 'node:path'
import { build, checkNode, dataFolder, endServer, endWithChildren, install, main, node, releaseDatabase, run, say, StepError } from '../../db/scripts/steps.mjs'
import { chromium } from './chromium.mjs'
import { folder, testDatabase, testServer } from './settings.mjs'

const resultsFile = path.join(folder, 'results.json')
const tally = { passed: 0, failed: 0 }
const broken = []

/** A step that is itself a check: it counts as one test. Resolves to whether it passed. */
async function check(name, step) {
  const from = performance.now()
  try {
    const value = await step()
    tally.passed++
    say(`${name}: passed in ${((performance.now() - from) / 1000).toFixed(1)} s`)
    return { value }
  } catch (error) {
    if (!(error instanceof StepError)) throw error
    tally.failed++
    broken.push(name)
    say(`${name}: FAILED\n${error.message}`)
    return undefined
  }
}

function addResults() {
  const results = JSON.parse(fs.readFileSync(resultsFile, 'utf8'))
  const skipped = results.numPendingTests + (results.numTodoTests ?? 0)
  // A file that cannot be loaded has no tests to fail; a test that did not run has not passed.
  const unloaded = results.testResults.filter((file) => file.status === 'failed' && file.assertionResults.every((test) => test.status !== 'failed')).length
  if (skipped > 0) say(`${skipped} tests did not run; each counts as failed`)
  if (unloaded > 0) say(`${unloaded} test files could not be run; each counts as failed`)
  tally.passed += results.numPassedTests
  tally.failed += results.numFailedTests + skipped + unloaded
  return results.success
}

async function everything() {
  const lint = () => node(['node_modules/eslint/bin/eslint.js', '.', '--max-warnings', '0'])
  const types = async () => {
    await node(['node_modules/next/dist/bin/next', 'typegen'])
    await node(['node_modules/typescript/bin/tsc', '--noEmit'])
  }
  // each of the two keeps one core busy; types wait for the build, which writes into the same folder
  const building = check('build', build)
  const prepared = await Promise.all([check('database', testDatabase), building, check('browser', chromium), check('lint', lint), building.then(() => check('types', types))])
  const [databaseStep, buildStep, browserStep] = prepared
  if (!databaseStep || !buildStep || !browserStep) return
  const server = await check('server', () => testServer({ ...databaseStep.value, CHROMIUM: browserStep.value }))
  if (!server) return
  try {
    fs.rmSync(resultsFile, { force: true })
    const args = ['node_modules/vitest/vitest.mjs', 'run', '--reporter=default', '--reporter=json', `--outputFile.json=${resultsFile}`, ...process.argv.slice(2)]
    const clean = await run(process.execPath, args, { env: { ...server.value.env, NODE_ENV: 'test' } }).then(() => true, () => false)
    if (!fs.existsSync(resultsFile)) throw new StepError('vitest ended without results')
    const success = addResults()
    if ((!clean || !success) && tally.failed === 0) {
      tally.failed++
      broken.push('vitest (see above)')
    }
  } finally {
    await endServer(server.value.child)
  }
}

endWithChildren()
await main(async () => {
  checkNode()
  dataFolder()
  await install()
  try {
    await everything()
  } finally {
    await releaseDatabase()
  }
  if (broken.length > 0) say(`failed before or beside the tests: ${broken.join(', ')}`)
  process.stdout.write(`\n${tally.passed} passed, ${tally.failed} failed\n`)
  process.exit(tally.failed === 0 && tally.passed > 0 ? 0 : 1)
})
