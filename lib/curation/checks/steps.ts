import type { LevelValues } from '@/openapi/schemas/change'
import type { AnyRow, ChangeInput, Checked, HyperfineRow, IsotopeRow, LevelRow, PublishedTable, SpeciesRow } from '../rows'
import { publishedIn } from '../subjects'
import { atomOf, differences, Findings, readHyperfine, readIsotope, readLevelValues, readSource, readSpecies } from '../values'
import { checkDropped } from './dropped'
import { checkLevelAlone } from './level-alone'
import { checkAbundances, checkHyperfine, checkIsotope, checkJOfHyperfine } from './nuclei'
import { checkSuccessor, readRetirement } from './retire'
import { checkSources } from './sources'
import { checkSpecies, checkSpeciesAgainstLevels } from './species'
import { checkSpeciesLevels } from './species-levels'
import { checkedOf, speciesOfLevel, type Union, type UnionLevel, type Work } from './work'

const WHAT = { level: 'level', source: 'source', species: 'species', isotope: 'isotope', hyperfine: 'set of hyperfine constants' } as const

/** What is made must not be there, and what is replaced must be. */
function checkPresence(work: Work): void {
  const { change, findings, published } = work
  if (change.action === 'create' && published !== undefined) findings.error(`${change.kind}_exists`, null, `${change.subject} is in the edition already: replace it instead.`)
  if (change.action === 'replace' && published === undefined) findings.error(`${change.kind}_unknown`, null, `There is no ${WHAT[change.kind]} ${change.subject} in the edition: create it instead.`)
  if (change.action === 'replace' && change.kind === 'level' && (published?.row as LevelRow | undefined)?.status === 'retired') {
    findings.error('level_retired', null, `${change.subject} is retired and stays so: make a new level.`)
  }
}

/** A change that changes nothing would make a revision without a difference. */
function checkDifference({ change, findings, published }: Work, row: AnyRow | null): void {
  if (change.action !== 'replace' || published === undefined || row === null || differences(change.kind, published.row, row).length > 0) return
  findings.error('no_difference', null, 'The values are those that the table has already: change one, or take the change out.')
}

function readOther(work: Work): AnyRow | null {
  const { change } = work
  const findings = new Findings()
  const read = (): AnyRow | null => {
    if (change.kind === 'source') return readSource(findings, change.given as object)
    if (change.kind === 'species') return readSpecies(findings, change.subject, change.given as object)
    return change.kind === 'isotope' ? readIsotope(findings, change.given as object) : readHyperfine(findings, change.given as object)
  }
  const row = read()
  work.findings.list.push(...findings.list)
  checkDifference(work, row)
  return row
}

function readLevel(union: Union, work: Work): void {
  const { change, findings } = work
  const before = (work.published?.row as LevelRow | undefined) ?? null
  const speciesId = speciesOfLevel(change.subject)
  const species = union.species.get(speciesId)
  // a species that this amendment makes and that cannot be read yet has errors of its own
  if (species === undefined && !union.works.some((other) => other.change.kind === 'species' && other.change.subject === speciesId)) {
    findings.error('species_unknown', null, `There is no species ${speciesId} in the edition or in this amendment: add it first.`)
  }
  const atom = species === undefined ? null : atomOf(speciesId, species)
  const read = readLevelValues(change.given as LevelValues, { atom })
  findings.list.push(...read.findings)
  work.parts = read.parts
  work.row = read.row
  checkLevelAlone(findings, read.parts, atom, before)
  if (before !== null && read.row !== null) checkDropped(findings, before, read.row)
  if (before?.status === 'active') checkDifference(work, read.row)
}

function begin(table: PublishedTable, changes: readonly ChangeInput[]): Union {
  const works = changes.map((change): Work => ({ change, findings: new Findings(), row: null, published: publishedIn(table, change.kind, change.subject), parts: null }))
  const union: Union = {
    table, works, levelWorks: new Map(), sources: new Set(table.sources.keys()),
    species: new Map([...table.species].map(([id, { row }]) => [id, row])),
    isotopes: new Map([...table.isotopes].map(([id, { row }]) => [id, row])),
    hyperfine: new Map([...table.hyperfine].map(([id, { row }]) => [id, { row, work: null }])),
  }
  const seen = new Map<string, Work>()
  for (const work of works) {
    const { kind, subject } = work.change
    const name = `${kind} ${subject}`
    const first = seen.get(name)
    if (first === undefined) seen.set(name, work)
    else for (const one of [first, work]) one.findings.error('changed_twice', null, `Two changes are of ${subject}: only one can be made.`)
    if (kind === 'source') union.sources.add(subject)
    if (kind === 'level') union.levelWorks.set(subject, work)
  }
  return union
}

/** Reads everything but levels; in this order, since each is read against those before. */
function readOthers(union: Union): void {
  for (const kind of ['species', 'source', 'isotope', 'hyperfine'] as const) {
    for (const work of union.works) {
      if (work.change.kind !== kind) continue
      checkPresence(work)
      work.row = readOther(work)
      if (kind === 'species' && work.row !== null) union.species.set(work.change.subject, work.row as SpeciesRow)
      if (kind === 'isotope' && work.row !== null) union.isotopes.set(work.change.subject, work.row as IsotopeRow)
      if (kind === 'hyperfine' && work.row !== null) union.hyperfine.set(work.change.subject, { row: work.row as HyperfineRow, work })
    }
  }
}

interface Touched { levels: Work[]; species: Work[]; isotopes: Work[]; hyperfine: Work[] }

function bySpecies(union: Union): Map<string, Touched> {
  const touched = new Map<string, Touched>()
  const at = { level: 'levels', species: 'species', isotope: 'isotopes', hyperfine: 'hyperfine' } as const
  for (const work of union.works) {
    const { kind, speciesId, subject } = work.change
    if (kind === 'source') continue
    const id = speciesId ?? (kind === 'level' ? speciesOfLevel(subject) : subject)
    const one = touched.get(id) ?? { levels: [], species: [], isotopes: [], hyperfine: [] }
    one[at[kind]].push(work)
    touched.set(id, one)
  }
  return touched
}

/** The levels of the species touched, as they would be. */
function unionLevels(union: Union, touched: ReadonlyMap<string, Touched>): Map<string, UnionLevel[]> {
  const levels = new Map<string, UnionLevel[]>([...touched.keys()].map((id) => [id, []]))
  for (const [id, { row }] of union.table.levels) {
    if (row.status === 'active' && !union.levelWorks.has(id)) levels.get(speciesOfLevel(id))?.push({ id, row, work: null, before: row })
  }
  for (const [id, work] of union.levelWorks) {
    const row = work.row as LevelRow | null
    const before = (work.published?.row as LevelRow | undefined) ?? null
    // a half-typed change leaves its level where it was
    if (row === null && before?.status === 'active') levels.get(speciesOfLevel(id))?.push({ id, row: before, work: null, before })
    if (row?.status === 'active') levels.get(speciesOfLevel(id))?.push({ id, row, work, before: before?.status === 'active' ? before : null })
  }
  return levels
}

/** Yields after every little piece of work, so that whoever drives it may pause; its value is what was found, in the order given. */
export function* checkSteps(table: PublishedTable, changes: readonly ChangeInput[]): Generator<void, Checked[], void> {
  const union = begin(table, changes)
  readOthers(union)
  const constantsOf = new Map<string, string[]>()
  for (const key of union.hyperfine.keys()) {
    const level = key.slice(0, key.indexOf('/'))
    constantsOf.set(level, [...(constantsOf.get(level) ?? []), key])
  }
  for (const work of union.works) {
    if (work.change.kind !== 'level') continue
    checkPresence(work)
    if (work.change.action === 'retire') readRetirement(work)
    else readLevel(union, work)
    yield
  }
  const touched = bySpecies(union)
  const levels = unionLevels(union, touched)
  for (const [id, works] of touched) {
    const ofSpecies = levels.get(id) ?? []
    for (const work of works.species) {
      checkSpecies(work)
      checkSpeciesAgainstLevels(work, ofSpecies)
    }
    for (const work of works.isotopes) {
      if (!union.species.has(id)) work.findings.error('species_unknown', null, `There is no species ${id} in the edition or in this amendment: add it first.`)
      checkIsotope(union, work)
    }
    if (works.isotopes.length > 0) checkAbundances(union, id, works.isotopes)
    for (const work of works.hyperfine) checkHyperfine(union, work)
    for (const work of works.levels) {
      if (work.change.action === 'retire') checkSuccessor(union, work)
      else checkJOfHyperfine(union, work, constantsOf)
    }
    if (works.levels.length > 0) checkSpeciesLevels(union.species.get(id), ofSpecies, works.levels)
    yield
  }
  for (const work of union.works) {
    checkSources(union, work)
    // the database wants a reason where there is no row
    if (work.row === null && work.findings.errors === 0) work.findings.error('unreadable', null, 'The values cannot be read.')
  }
  return union.works.map(checkedOf)
}

