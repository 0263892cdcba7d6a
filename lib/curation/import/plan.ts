import { quoted } from '@/lib/units/number'
import type { FieldDifference, Finding, LevelValues } from '@/openapi/schemas/change'
import type { ImportVerdict } from '@/openapi/schemas/import'
import { checkChangesInSteps } from '../checks'
import type { ChangeInput, Checked, LevelRow, PublishedTable, SpeciesRow } from '../rows'
import { type Atom, atomOf, differences, readLevelValues } from '../values'
import { fault, type Reader, RowCells } from './cells'
import { contradictions, olderRevision, saysTheSame, valuesOf } from './level-values'
import { ambiguity, type KnownLevel, Matcher, type Named, namedBy, namingRow } from './match'
import type { ReadFile } from './read-file'
import { speciesLike, speciesName } from './species-name'

/** A change of the amendment as it stands, before the import. */
export interface OwnChange extends ChangeInput { row: unknown }

/** What is imported into: the newest edition's part, and the amendment's own changes on top. */
export interface Ground { table: PublishedTable; own: readonly OwnChange[] }

/** What a row makes of the amendment: a change to write, or (where the row says what is published) one to take out. */
export interface RowChange { subject: string; speciesId: string; known: KnownLevel | null; given: LevelValues; row: LevelRow | null; findings: Finding[] }

export interface PlannedRow {
  row: number
  verdict: ImportVerdict
  level: string | null
  findings: readonly Finding[]
  fields: readonly FieldDifference[]
  change: RowChange | null
  /** The amendment's change of the level is taken out: the row says what is published. */
  takeOut: string | null
}

/** Steps of long work: it is told how far it is, and may be ended, whenever the event loop had its turn. */
export interface Steps { signal: AbortSignal; tell: (share: number) => void }

const PAUSE_EVERY = 250
const NONE: readonly never[] = []

export async function turn({ signal }: Pick<Steps, 'signal'>): Promise<void> {
  await new Promise((resolve) => void setImmediate(resolve))
  signal.throwIfAborted()
}

/** Levels to be made have these for ordinals until they get their own, which says which row they come from. */
const PROVISIONAL = 900_000_000
export const provisional = (species: string, row: number): string => `${species}.${PROVISIONAL + row}`
const PROVISIONAL_ID = /\b[A-Z][a-z]?-[IVXLCDM]+\.9(\d{8})\b/g
/** A sentence that names levels to be made, with what `name` calls them. */
export const renamed = (findings: readonly Finding[], name: (row: number) => string): Finding[] =>
  findings.map((one) => (one.detail.includes('.9') ? { ...one, detail: one.detail.replace(PROVISIONAL_ID, (_, row: string) => name(Number(row))) } : one))

/** Species that rows may be of, with those that the amendment makes or corrects. */
function speciesOf({ table, own }: Ground): Map<string, SpeciesRow> {
  const species = new Map([...table.species].map(([id, { row }]) => [id, row]))
  for (const change of own) if (change.kind === 'species' && change.row !== null) species.set(change.subject, change.row as SpeciesRow)
  return species
}

function knownLevels({ table, own }: Ground): Map<string, KnownLevel> {
  const known = new Map<string, KnownLevel>()
  const speciesOfLevel = (id: string): string => id.slice(0, id.indexOf('.'))
  for (const [id, { row, revision }] of table.levels) known.set(id, { id, species: speciesOfLevel(id), row, published: row, revision, changeId: null, retiring: false })
  for (const change of own) {
    if (change.kind !== 'level') continue
    const inForce = table.levels.get(change.subject)
    const published = inForce?.row ?? null
    known.set(change.subject, {
      id: change.subject, species: speciesOfLevel(change.subject), published, revision: inForce?.revision ?? null, changeId: change.id,
      row: change.action === 'retire' ? published : (change.row as LevelRow | null), retiring: change.action === 'retire',
    })
  }
  return known
}

interface Setting { reader: Reader; matcher: Matcher; species: ReadonlyMap<string, SpeciesRow>; atoms: Map<string, Atom> }
/** A row that names no level exactly. */
interface Waiting { cells: RowCells; species: string; named: Named }

const plannedError = (row: number, findings: readonly Finding[], level: string | null = null): PlannedRow => ({ row, verdict: 'error', level, findings, fields: NONE, change: null, takeOut: null })

function atomFor(setting: Setting, species: string): Atom | null {
  const found = setting.atoms.get(species)
  if (found !== undefined) return found
  const row = setting.species.get(species)
  if (row === undefined) return null
  const atom = atomOf(species, row)
  setting.atoms.set(species, atom)
  return atom
}

/** A row about a level of the table. */
function aboutLevel(setting: Setting, row: number, cells: RowCells, level: KnownLevel): PlannedRow {
  const planned: PlannedRow = { row, verdict: 'same', level: level.id, findings: NONE, fields: NONE, change: null, takeOut: null }
  if (level.row !== null && saysTheSame(cells, level.row)) return planned
  const { values, faults } = valuesOf(cells, namingRow(level))
  const read = readLevelValues(values, { atom: atomFor(setting, level.species) })
  // a level that is retired stays so, whatever its row says of it
  const readRow = read.row === null || level.row === null ? read.row : { ...read.row, status: level.row.status, retiredReason: level.row.retiredReason, successor: level.row.successor }
  if (readRow !== null) faults.push(...contradictions(cells, readRow))
  if (faults.length > 0) return plannedError(row, [...faults, ...read.findings.filter((one) => one.severity === 'error')], level.id)
  if (readRow !== null && level.row !== null && differences('level', level.row, readRow).length === 0) return planned
  if (readRow !== null && level.published !== null && differences('level', level.published, readRow).length === 0) {
    return { ...planned, verdict: 'changed', fields: level.row === null ? NONE : differences('level', level.row, readRow), takeOut: level.changeId }
  }
  const older = olderRevision(cells, level.id, level.revision)
  if (older.length > 0) return plannedError(row, older, level.id)
  return { ...planned, verdict: 'changed', change: { subject: level.id, speciesId: level.species, known: level, given: values, row: null, findings: [] } }
}

function newLevel(setting: Setting, row: number, { cells, species }: Pick<Waiting, 'cells' | 'species'>): PlannedRow {
  const { values, faults } = valuesOf(cells, null)
  // the checks read it again: here only what contradicts itself is looked for
  const read = faults.length > 0 || cells.controlled ? readLevelValues(values, { atom: atomFor(setting, species) }) : null
  if (read !== null && read.row !== null) faults.push(...contradictions(cells, read.row))
  if (read !== null && faults.length > 0) return plannedError(row, [...faults, ...read.findings.filter((one) => one.severity === 'error')])
  return { row, verdict: 'new', level: null, findings: NONE, fields: NONE, change: { subject: provisional(species, row), speciesId: species, known: null, given: values, row: null, findings: [] }, takeOut: null }
}

function unknownSpecies(setting: Setting, species: string): Finding {
  const near = speciesLike(species).filter((id) => setting.species.has(id))
  return fault('species_unknown', 'species', `There is no species ${quoted(species)} in the newest edition or in this amendment: ${near.length > 0 ? `did you mean ${near.join(' or ')}?` : 'add the species to the amendment first.'}`)
}

/** What a row is about: settled at once where it names its level or cannot be used, else it waits until all names are known. */
function settle(setting: Setting, { row, cells: raw }: ReadFile['rows'][number]): PlannedRow | Waiting {
  const cells = new RowCells(setting.reader, raw)
  const faults = cells.faults()
  if (faults.length > 0) return plannedError(row, faults)
  const byId = setting.matcher.ofId(cells)
  if (byId?.kind === 'error') return plannedError(row, [byId.fault])
  if (byId?.kind === 'level') return aboutLevel(setting, row, cells, byId.level)
  const species = speciesName(cells.text('species'))
  if (species === null) return plannedError(row, [fault('missing_field', 'species', 'The row names neither a level nor a species.')])
  if (!setting.species.has(species)) return plannedError(row, [unknownSpecies(setting, species)])
  const named = namedBy(cells, atomFor(setting, species))
  // a term that cannot be read: the reader of levels says why
  if (named === null) return newLevel(setting, row, { cells, species })
  const exact = setting.matcher.exactly(species, named)
  return exact === undefined ? { cells, species, named } : aboutLevel(setting, row, cells, exact)
}

function refuseRepeated(rows: PlannedRow[]): void {
  const first = new Map<string, number>()
  for (const [at, planned] of rows.entries()) {
    if (planned.level === null) continue
    const before = first.get(planned.level)
    if (before === undefined) {
      first.set(planned.level, at)
      continue
    }
    for (const [one, other] of [[before, at], [at, before]] as const) {
      const mine = rows[one]
      if (mine !== undefined) rows[one] = plannedError(mine.row, [...mine.findings, fault('row_repeated', null, `Row ${rows[other]?.row ?? 0} is about ${planned.level} too: a level has one row.`)], planned.level)
    }
  }
}

/** Matches every row with the table, and says what it makes of it. Takes the rows out of the file as it goes, so that they need no memory longer than they must. */
export async function planRows(file: ReadFile, ground: Ground, steps: Steps): Promise<PlannedRow[]> {
  const setting: Setting = { reader: file.reader, matcher: new Matcher(knownLevels(ground).values()), species: speciesOf(ground), atoms: new Map() }
  const planned: PlannedRow[] = []
  const waiting: { at: number; rest: Waiting }[] = []
  const taken = new Set<string>()
  const total = file.rows.length
  const rows = file.rows.reverse()
  for (let row = rows.pop(); row !== undefined; row = rows.pop()) {
    const settled = settle(setting, row)
    if ('verdict' in settled) {
      planned.push(settled)
      if (settled.level !== null) taken.add(settled.level)
    } else {
      waiting.push({ at: planned.length, rest: settled })
      planned.push(plannedError(row.row, NONE))
    }
    if (planned.length % PAUSE_EVERY === 0) {
      steps.tell(planned.length / total)
      await turn(steps)
    }
  }
  waiting.reverse()
  for (let next = waiting.pop(); next !== undefined; next = waiting.pop()) {
    const { at, rest } = next
    const row = planned[at]?.row ?? 0
    const match = setting.matcher.nearly(rest.species, rest.named, taken)
    planned[at] = match.kind === 'level' ? aboutLevel(setting, row, rest.cells, match.level)
      : match.kind === 'ambiguous' ? { ...plannedError(row, [ambiguity(match.levels)]), verdict: 'ambiguous' }
        : newLevel(setting, row, rest)
    if (waiting.length % PAUSE_EVERY === 0) await turn(steps)
  }
  refuseRepeated(planned)
  return planned
}

const inputOf = (id: string, change: RowChange): ChangeInput => ({
  id, kind: 'level', action: change.known?.published === null || change.known === null ? 'create' : 'replace', subject: change.subject, speciesId: change.speciesId, given: change.given, reason: null, successor: null,
})

/** Checks everything that the amendment would hold, in union, and settles the verdicts. Resolves to what is found anew about changes that were there before. */
export async function checkPlan(rows: PlannedRow[], ground: Ground, steps: Steps): Promise<Map<string, Checked>> {
  const gone = new Set(rows.flatMap(({ change, takeOut }) => [takeOut, change?.known?.changeId].filter((id) => typeof id === 'string')))
  const staying = ground.own.filter(({ id }) => !gone.has(id))
  const making = rows.flatMap((planned) => (planned.change === null ? [] : [{ planned, change: planned.change }]))
  if (making.length === 0) return new Map()
  const inputs = [...staying, ...making.map(({ planned, change }) => inputOf(`row ${planned.row}`, change))]
  const checked = await checkChangesInSteps(ground.table, inputs, { signal: steps.signal, onProgress: (done, total) => steps.tell(done / total) })
  for (const [i, { planned, change }] of making.entries()) {
    const { row = null, findings = [] } = checked[staying.length + i] ?? {}
    change.row = row as LevelRow | null
    change.findings = findings
    planned.findings = findings.length === 0 ? NONE : renamed(findings, (of) => `row ${of}`)
    if (findings.some((one) => one.severity === 'error')) planned.verdict = 'error'
    else if (change.known !== null) planned.fields = differences('level', namingRow(change.known), change.row)
    if (i % PAUSE_EVERY === 0) await turn(steps)
  }
  return new Map(staying.flatMap(({ id }, i) => {
    const found = checked[i]
    return found === undefined ? [] : [[id, found]]
  }))
}
