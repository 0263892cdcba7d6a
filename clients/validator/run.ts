import { parseArgs } from 'node:util'
import { BrokenAnswerError, ProblemError } from '../typescript'
import { type Report, type Result, validate } from './validate'

// npm run validate -- <base-url> [--key K] [--json] [--seed N] [--count N]
const USAGE = `Asks a running instance questions whose answers are known, and fails where one is not as it must be.

  npm run validate -- <base-url> [--key K] [--json] [--seed N] [--count N]

  base-url   where the instance answers, such as http://127.0.0.1:3000
  --key K    API key, where strangers may not read
  --json     the report as JSON
  --seed N   what is drawn: the same N draws the same levels and lines (default: by chance, and told)
  --count N  how many levels and lines are drawn (default 12)

Ends with 0 where every claim held, 1 where one did not, 2 where nothing could be checked.
`
/** Failures of one check that the text tells; JSON has all. */
const TOLD = 5

function usage(said: string): never {
  process.stderr.write(`${said}\n\n${USAGE}`)
  process.exit(2)
}

function options() {
  try {
    return parseArgs({ allowPositionals: true, options: { key: { type: 'string' }, json: { type: 'boolean', default: false }, seed: { type: 'string' }, count: { type: 'string', default: '12' }, help: { type: 'boolean', default: false } } })
  } catch (error) {
    return usage(error instanceof Error ? error.message : String(error))
  }
}

const whole = (name: string, text: string, most: number): number => (/^\d+$/.test(text) && Number(text) >= 1 && Number(text) <= most ? Number(text) : usage(`--${name} is a whole number from 1 to ${most}, not ${text}`))

function line({ outcome, check, claims, claim, reason, failures, seconds }: Result): string {
  const mark = { held: 'ok    ', failed: 'FAILED', nothing: '-     ' }[outcome]
  const told = outcome === 'nothing' ? `not checked: ${reason ?? ''}` : `${claims} claims, ${seconds.toFixed(1)} s`
  const shown = failures.slice(0, TOLD).map((failure) => `         ${failure.claim}\n           ${failure.request}\n`)
  return `${mark} ${check}: ${claim} (${told})\n${shown.join('')}${failures.length > TOLD ? `         and ${failures.length - TOLD} more\n` : ''}`
}

const { values, positionals } = options()
if (values.help) {
  process.stdout.write(USAGE)
  process.exit(0)
}
const [address] = positionals
if (address === undefined || positionals.length > 1) usage('Give the address of one instance.')
if (!URL.canParse(address)) usage(`${address} is no address`)
const seed = values.seed === undefined ? Math.floor(Math.random() * 2 ** 31) + 1 : whole('seed', values.seed, 2 ** 32 - 1)
const write = (text: string): void => void (values.json || process.stdout.write(text))

let report: Report
try {
  write(`Asking ${address}, seed ${seed}\n`)
  report = await validate(address, { ...(values.key === undefined ? {} : { key: values.key }), seed, count: whole('count', values.count, 1000), told: (result) => write(line(result)) })
} catch (error) {
  // an instance that cannot be asked at all: nothing was checked
  const said = error instanceof ProblemError || error instanceof BrokenAnswerError || error instanceof Error ? error.message : String(error)
  process.stderr.write(`${address} could not be asked: ${said}${error instanceof Error && error.cause instanceof Error ? ` (${error.cause.message})` : ''}\n`)
  process.exit(2)
}
if (values.json) process.stdout.write(`${JSON.stringify(report, null, 2)}\n`)
else write(`\nEdition ${report.edition}, ${report.levels.length} levels, ${report.lines.length} lines: ${report.claims} claims, ${report.failures} did not hold.\n`)
process.exit(report.passed ? 0 : report.claims === 0 ? 2 : 1)
