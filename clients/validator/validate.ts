import { type Level, Lodeterm, type Transition } from '../typescript'
import { BULK_CHECKS } from './checks-bulk'
import { EDITION_CHECKS } from './checks-editions'
import { FORMAT_CHECKS } from './checks-formats'
import { PHYSICS_CHECKS } from './checks-physics'
import { TABLE_CHECKS } from './checks-table'
import { type Check, type Failure, Inquiry, NothingToCheck } from './inquiry'
import { Random } from './random'

export interface Result {
  check: string
  claim: string
  /** held: every claim did. nothing: there was nothing to check, see `reason`. */
  outcome: 'held' | 'failed' | 'nothing'
  claims: number
  failures: Failure[]
  reason: string | null
  seconds: number
}

export interface Report {
  address: string
  edition: number
  seed: number
  levels: string[]
  lines: string[]
  results: Result[]
  claims: number
  failures: number
  passed: boolean
}

export const CHECKS: readonly Check[] = [...TABLE_CHECKS, ...EDITION_CHECKS, ...PHYSICS_CHECKS, ...BULK_CHECKS, ...FORMAT_CHECKS]

export interface Questions { key?: string; seed: number; count: number; told?: (result: Result) => void; checks?: readonly Check[] }

/** Levels and lines by chance: a species, then a level of it, then a line of that level. */
async function draw(table: Lodeterm, random: Random, count: number): Promise<{ levels: Level[]; lines: Transition[] }> {
  const species: string[] = []
  for await (const one of table.each('listSpecies', { limit: 1000 })) if (one.level_count > 0) species.push(one.id)
  const [levels, lines] = [new Map<string, Level>(), new Map<string, Transition>()]
  for (let tries = 0; tries < 4 * count && species.length > 0 && levels.size < count; tries += 1) {
    const { data: some } = await table.get('listLevels', { species: random.pick(species) ?? '', limit: 1000 })
    const level = random.pick(some)
    if (level === undefined) continue
    levels.set(level.id, level)
    const { data: partners } = await table.get('listLevelTransitions', { level: level.id, limit: 1000, rules: random.pick(['ls', 'rigorous'] as const) ?? 'ls' })
    const line = random.pick(partners.filter((one) => one.verdict.allowed))
    if (line !== undefined) lines.set(line.id, line)
  }
  return { levels: [...levels.values()], lines: [...lines.values()] }
}

async function ask(check: Check, inquiry: Inquiry): Promise<Result> {
  const from = performance.now()
  let reason: string | null = null
  try {
    await check.run(inquiry)
    if (inquiry.claims === 0) reason = 'nothing drawn lends itself to it'
  } catch (error) {
    if (error instanceof NothingToCheck) reason = error.message
    // an answer that should not have been is a failure of the instance, not of the validator
    else inquiry.claim(false, () => (error instanceof Error ? `${error.name}: ${error.message}` : String(error)))
  }
  const { claims, failures } = inquiry
  const outcome = failures.length > 0 ? 'failed' : claims > 0 ? 'held' : 'nothing'
  return { check: check.name, claim: check.claim, outcome, claims, failures, reason: outcome === 'nothing' ? reason : null, seconds: (performance.now() - from) / 1000 }
}

/** Asks an instance questions whose answers are known. Passed: claims were made, and every one held. */
export async function validate(address: string, { key, seed, count, told, checks = CHECKS }: Questions): Promise<Report> {
  const table = await new Lodeterm(address, { ...(key === undefined ? {} : { key }), patience: { attempts: 10 } }).pinned()
  const edition = table.edition as number
  const document = (await table.get('getOpenApi')) as unknown as { paths: Record<string, Record<string, unknown>> }
  const live = new Set(Object.entries(document.paths).flatMap(([path, methods]) => Object.keys(methods).map((method) => `${method} ${path}`)))
  const random = new Random(seed)
  const { levels, lines } = await draw(table, random, count)
  const results: Result[] = []
  for (const check of checks) {
    const result = await ask(check, new Inquiry(table, edition, random, levels, lines, count, live))
    results.push(result)
    told?.(result)
  }
  const claims = results.reduce((sum, result) => sum + result.claims, 0)
  const failures = results.reduce((sum, result) => sum + result.failures.length, 0)
  return { address: table.api, edition, seed, levels: levels.map(({ id }) => id), lines: lines.map(({ id }) => id), results, claims, failures, passed: claims > 0 && failures === 0 }
}
