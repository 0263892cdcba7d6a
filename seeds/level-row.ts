import type { levelRevisions } from '@/db/schema'
import { checkLevelOfConfiguration, type Configuration, parseConfiguration, parseConfigurationOf, printConfiguration } from '@/lib/atomic/configuration'
import { parseHalf } from '@/lib/atomic/half'
import { parseTerm } from '@/lib/atomic/term'
import type { LevelSeed, SpeciesSeed } from './read'

/** What is wrong with the data; loading changes nothing then. */
export class SeedError extends Error {
  constructor(readonly problems: string[]) {
    super(`The data of the first edition cannot be loaded:\n${problems.map((problem) => `  ${problem}`).join('\n')}`)
    this.name = 'SeedError'
  }
}

type LevelRow = Omit<typeof levelRevisions.$inferInsert, 'levelId' | 'speciesId' | 'publishedFrom' | 'energySource'>

const two = (text: string | undefined): number | null => {
  if (text === undefined) return null
  const value = parseHalf(text)
  if (!value.ok) throw new SeedError([value.detail])
  return value.value
}

/** The species' core as a configuration; null where it has none. */
export function coreOf(species: SpeciesSeed): Configuration | null {
  if (species.core === '') return null
  const core = parseConfiguration(species.core)
  if (!core.ok) throw new SeedError([`${species.id}: core ${species.core}: ${core.detail}`])
  return core.value
}

/**
 * Turns one level of the data into its row, checking it on the way: the configuration's electrons against Z - charge, J whole or
 * half, parity and term against the configuration, and the term symbol against the momenta given beside it. Returns all that is wrong.
 */
export function levelRow(species: SpeciesSeed, core: Configuration | null, level: LevelSeed): { row: LevelRow; problems: string[] } {
  const twoJ = two(level.j) ?? -1
  const ls = level.coupling === 'LS'
  const row: LevelRow = {
    configuration: level.configuration,
    coupling: level.coupling,
    label: level.label,
    twoS: ls ? two(level.s) : null,
    l: ls ? (level.l ?? null) : null,
    twoJ,
    twoK: two(level.k),
    coreTwoS: two(level.core_s),
    coreL: level.core_l ?? null,
    coreTwoJ: two(level.core_j),
    lOuter: level.l_outer ?? null,
    outerTwoJ: null,
    parity: level.parity,
    alternativeName: level.alternative_name ?? null,
    energyInvcm: level.energy_invcm,
    energyEvidence: level.evidence,
    lineChecked: level.line_checked,
    note: level.note ?? null,
  }
  const problems: string[] = []
  const atom = { core, z: species.z, charge: species.charge }
  const configuration = parseConfigurationOf(level.configuration, atom)
  if (configuration.ok) {
    row.configuration = printConfiguration(configuration.value)
    const claimed = { electrons: species.z - species.charge, twoJ, parity: level.parity, twoS: row.twoS ?? null, l: row.l ?? null }
    problems.push(...checkLevelOfConfiguration(configuration.value, claimed).map((problem) => problem.detail))
  } else problems.push(configuration.detail)

  const term = parseTerm(`${level.term}${level.parity === 'odd' ? '*' : ''}${level.j}`)
  if (!term.ok) problems.push(term.detail)
  else if (term.value.kind === 'LS' && (term.value.twoS !== row.twoS || term.value.l !== row.l)) problems.push(`${level.term} disagrees with S = ${level.s}, L = ${level.l}`)
  else if (term.value.kind === 'J1K' && term.value.twoK !== row.twoK) problems.push(`${level.term} disagrees with K = ${level.k}`)
  return { row, problems }
}
