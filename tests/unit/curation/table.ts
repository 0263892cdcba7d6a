import type { ChangeInput, HyperfineRow, IsotopeRow, LevelRow, Published, PublishedTable, SourceRow, SpeciesRow } from '@/lib/curation/rows'
import { atomOf, readLevelValues } from '@/lib/curation/values'
import type { LevelValues } from '@/openapi/schemas/change'

const SODIUM: SpeciesRow = { name: 'sodium', element: 'Na', z: 11, charge: 0, coreConfiguration: '1s2.2s2.2p6', ionisationEnergyInvcm: 41449.451, ionisationSource: 'paper', ionisationEvidence: 'read', note: null }
const IRON: SpeciesRow = { name: 'iron', element: 'Fe', z: 26, charge: 0, coreConfiguration: '[Ar]', ionisationEnergyInvcm: 63737.704, ionisationSource: 'paper', ionisationEvidence: 'read', note: null }
const NEON: SpeciesRow = { name: 'neon', element: 'Ne', z: 10, charge: 0, coreConfiguration: '1s2.2s2', ionisationEnergyInvcm: 173929.77, ionisationSource: 'paper', ionisationEvidence: 'read', note: null }
const PAPER: SourceRow = { citation: 'Invented, A. (2026)', kind: 'article', authors: null, title: null, journal: null, year: 2026, doi: null, note: null }
export const SPECIES: Record<string, SpeciesRow> = { 'Na-I': SODIUM, 'Fe-I': IRON, 'Ne-I': NEON }

/** Values of a level as a curator writes them, whole and right. */
export const values = (configuration: string, term: string, energy: number, more: Partial<LevelValues> = {}): LevelValues => ({ configuration, term, energy_invcm: energy, energy_source: 'paper', energy_evidence: 'read', ...more })

const GIVEN: [id: string, LevelValues][] = [
  ['Na-I.1', values('3s', '2S1/2', 0)],
  ['Na-I.2', values('3p', '2P*1/2', 16956.17)],
  ['Na-I.3', values('3p', '2P*3/2', 16973.37, { energy_unc_invcm: 0.01, note: 'a note', measured_g: [{ value: 1.3342, unc: 0.0002, source: 'paper', evidence: 'read' }] })],
  ['Na-I.4', values('4s', '2S1/2', 25739.99)],
  ['Fe-I.1', values('3d6.4s2', 'a 5D4', 0)],
  ['Fe-I.2', values('3d6.4s2', 'a 5D3', 415.93)],
  ['Fe-I.3', values('3d6.4s2', 'a 5D2', 704.0)],
  ['Fe-I.4', values('3d6.4s2', 'a 5D1', 888.13)],
  ['Ne-I.1', values('2p6', '1S0', 0)],
  ['Ne-I.2', values('2p5(2P3/2)3s', '2[3/2]*2', 134041.84, { coupling: 'J1K', core: '2P*3/2', l_outer: 0 })],
]

function rowOf(id: string, given: LevelValues): LevelRow {
  const species = id.slice(0, id.indexOf('.'))
  const { row, findings } = readLevelValues(given, { atom: atomOf(species, SPECIES[species] ?? SODIUM) })
  if (row === null) throw new Error(`${id}: ${JSON.stringify(findings)}`)
  return row
}

const published = <R>(entries: [string, R][]): Map<string, Published<R>> => new Map(entries.map(([id, row]) => [id, { revision: 1, row }]))

/** A small table of three species. */
export function smallTable(): PublishedTable {
  const levels = published(GIVEN.map(([id, given]): [string, LevelRow] => [id, rowOf(id, given)]))
  const gone = levels.get('Na-I.4')
  if (gone !== undefined) levels.set('Na-I.5', { revision: 2, row: { ...gone.row, configuration: '5s', status: 'retired', retiredReason: 'a mistake', successor: 'Na-I.4' } })
  return {
    edition: 1, species: published(Object.entries(SPECIES)), sources: published([['paper', PAPER]]), levels,
    isotopes: published<IsotopeRow>([
      ['Na-I/23', { massU: 22.98976928, twoI: 3, abundancePercent: 100, gI: -0.0008046108, source: 'paper', evidence: 'read', note: null }],
      ['Ne-I/20', { massU: 19.99244, twoI: 0, abundancePercent: 90.48, gI: null, source: 'paper', evidence: 'read', note: null }],
    ]),
    hyperfine: published<HyperfineRow>([['Na-I.3/23', { aMhz: 18.534, aUncMhz: 0.015, bMhz: 2.724, bUncMhz: 0.03, source: 'paper', evidence: 'read', note: null }]]),
  }
}

let counter = 0
type Given = Partial<Omit<ChangeInput, 'given'>> & { given?: unknown }
const input = (kind: ChangeInput['kind'], subject: string, speciesId: string | null, more: Given): ChangeInput => ({ id: `c${(counter += 1)}`, kind, action: 'replace', subject, speciesId, given: {}, reason: null, successor: null, ...more })

export const change = {
  level: (subject: string, given: LevelValues, more: Given = {}) => input('level', subject, subject.slice(0, subject.indexOf('.')), { given, ...more }),
  create: (subject: string, given: LevelValues) => input('level', subject, subject.slice(0, subject.indexOf('.')), { given, action: 'create' }),
  retire: (subject: string, reason: string | null, successor: string | null = null) => input('level', subject, subject.slice(0, subject.indexOf('.')), { action: 'retire', reason, successor }),
  source: (subject: string, given: unknown, action: ChangeInput['action'] = 'create') => input('source', subject, null, { given, action }),
  species: (subject: string, given: unknown, action: ChangeInput['action'] = 'replace') => input('species', subject, subject, { given, action }),
  isotope: (subject: string, given: unknown, action: ChangeInput['action'] = 'replace') => input('isotope', subject, subject.slice(0, subject.indexOf('/')), { given, action }),
  hyperfine: (subject: string, given: unknown, action: ChangeInput['action'] = 'replace') => input('hyperfine', subject, subject.slice(0, subject.indexOf('.')), { given, action }),
}
