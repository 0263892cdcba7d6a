import { quoted, readNumber } from '@/lib/units/number'
import { Coupling } from '@/openapi/schemas/common'
import type { Finding } from '@/openapi/schemas/change'
import type { LevelRow } from '../rows'
import { type Atom, readConfiguration, readLevelTerm, readPrinted } from '../values'
import { fault, type RowCells } from './cells'
import { speciesName } from './species-name'
import { composeTerm } from './term'

/** A level as the amendment leaves it: from the newest edition, or from a change of the amendment. */
export interface KnownLevel {
  id: string
  species: string
  /** As it is now: what a row is compared with. Null where the amendment's change of it cannot be read. */
  row: LevelRow | null
  /** As the newest edition has it; null for one that the amendment creates. */
  published: LevelRow | null
  /** Revision that the newest edition has of it. */
  revision: number | null
  /** The amendment's own change of it. */
  changeId: string | null
  /** The amendment retires it. */
  retiring: boolean
}

/** Energies nearer than this, or than three standard deviations (within reason), are one level's. */
const NEAR_INVCM = 0.01
const FARTHEST_INVCM = 1

const numbersOf = (row: Pick<LevelRow, 'coupling' | 'twoS' | 'l' | 'twoK' | 'twoJ' | 'parity' | 'outerTwoJ'> & { coreTwoJ: number | null }): string =>
  `${row.coupling} ${row.twoS ?? ''} ${row.l ?? ''} ${row.twoK ?? ''} ${row.coupling === 'jj' ? (row.coreTwoJ ?? '') : ''} ${row.outerTwoJ ?? ''} ${row.twoJ} ${row.parity}`

/** What of a row says which level it is about. */
interface Named { term: string; configuration: string | null; label: string | null; repeatIndex: number | null; energy: number | null; unc: number | null }

export type Match =
  | { kind: 'level'; level: KnownLevel }
  | { kind: 'new' }
  | { kind: 'ambiguous'; levels: KnownLevel[] }
  | { kind: 'error'; fault: Finding }

const LISTED = 5

function namedBy(cells: RowCells, atom: Atom | null): Named | null {
  const composed = composeTerm(cells, null)
  const coupling = composed.coupling ?? 'LS'
  if (composed.text === null || !(Coupling.options as readonly string[]).includes(coupling)) return null
  const read = readLevelTerm(composed.text, coupling as Coupling)
  if (!read.ok) return null
  const { term, twoJ, parity, label } = read.value
  const numbers = {
    coupling: coupling as Coupling, twoJ, parity,
    twoS: term?.kind === 'LS' ? term.twoS : null, l: term?.kind === 'LS' ? term.l : null, twoK: term?.kind === 'J1K' ? term.twoK : null,
    coreTwoJ: term?.kind === 'jj' ? term.twoJ1 : null, outerTwoJ: term?.kind === 'jj' ? term.twoJ2 : null,
  }
  const text = cells.text('configuration')
  const configuration = text === null ? null : readConfiguration(text.trim(), atom)
  return {
    term: numbersOf(numbers), configuration: configuration !== null && configuration.ok ? configuration.value.canonical : null, label,
    repeatIndex: readNumber(cells.text('repeat_index') ?? ''),
    energy: readNumber(cells.text('energy_invcm') ?? '') ?? readPrinted(cells.text('energy_literal') ?? cells.text('energy_invcm') ?? '')?.value ?? null,
    unc: readNumber(cells.text('energy_unc_invcm') ?? ''),
  }
}

/** What a level is named and found by, even while the change of it cannot be read. */
export const namingRow = (level: KnownLevel): LevelRow | null => level.row ?? level.published

function isNear(named: Named, row: LevelRow | null): boolean {
  if (named.energy === null || row === null) return false
  const deviation = Math.hypot(named.unc ?? 0, row.energyUncInvcm ?? 0)
  return Math.abs(named.energy - row.energyInvcm) <= Math.max(NEAR_INVCM, Math.min(FARTHEST_INVCM, 3 * deviation))
}

/** Finds the level of the table that a row is about. */
export class Matcher {
  private readonly byId = new Map<string, KnownLevel>()
  private readonly byName = new Map<string, KnownLevel>()
  private readonly byTerm = new Map<string, KnownLevel[]>()

  constructor(levels: Iterable<KnownLevel>) {
    for (const level of levels) {
      this.byId.set(level.id, level)
      const row = namingRow(level)
      if (row === null || row.status !== 'active' || level.retiring) continue
      const term = `${level.species} ${numbersOf(row)}`
      this.byName.set(`${term}|${row.configuration}|${row.label ?? ''}|${row.repeatIndex ?? ''}`, level)
      const list = this.byTerm.get(term)
      if (list === undefined) this.byTerm.set(term, [level])
      else list.push(level)
    }
  }

  /** By the id that the row names; null where it names none. */
  ofId(cells: RowCells): Match | null {
    const id = cells.text('id')?.trim() ?? null
    if (id === null) return null
    const level = this.byId.get(id)
    if (level === undefined) return { kind: 'error', fault: fault('level_unknown', 'id', `There is no level ${quoted(id)} in the newest edition or in this amendment; leave the cell empty for a new level.`) }
    const species = speciesName(cells.text('species'))
    if (species !== null && species !== level.species) return { kind: 'error', fault: fault('column_contradicts', 'species', `${id} is a level of ${level.species}, and the row says ${quoted(species)}.`) }
    if (level.retiring) return { kind: 'error', fault: fault('level_retiring', 'id', `This amendment retires ${id}; take out that change first.`) }
    return { kind: 'level', level }
  }

  /** By everything that names a level: configuration, label, term, J and repeat index. */
  exactly(species: string, named: Named): KnownLevel | undefined {
    return named.configuration === null ? undefined : this.byName.get(`${species} ${named.term}|${named.configuration}|${named.label ?? ''}|${named.repeatIndex ?? ''}`)
  }

  /**
   * By term, J and parity, and configuration or nearly the same energy, where the row does not name a level exactly. A row that says
   * more than a level (a label, a repeat index) is another one unless the energies are the same. `taken` are named exactly by other rows.
   */
  nearly(species: string, named: Named, taken: ReadonlySet<string>): Match {
    const fitting = (this.byTerm.get(`${species} ${named.term}`) ?? []).filter((level) => {
      const row = namingRow(level)
      if (row === null || taken.has(level.id)) return false
      if (named.repeatIndex !== null && row.repeatIndex !== null && named.repeatIndex !== row.repeatIndex) return false
      if (isNear(named, row)) return true
      return named.configuration === row.configuration && (named.label === null || named.label === row.label) && (named.repeatIndex === null || named.repeatIndex === row.repeatIndex)
    })
    // of several with the same name but for label or index, the one of the same energy is meant
    const near = fitting.filter((level) => isNear(named, namingRow(level)))
    const [only, ...others] = near.length === 1 ? near : fitting
    if (only === undefined) return { kind: 'new' }
    return others.length === 0 ? { kind: 'level', level: only } : { kind: 'ambiguous', levels: fitting }
  }
}

export const ambiguity = (levels: readonly KnownLevel[]): Finding => fault('level_ambiguous', null,
  `The row could be about ${levels.slice(0, LISTED).map((level) => `${level.id} (${namingRow(level)?.configuration ?? ''}, ${namingRow(level)?.energyInvcm ?? ''} cm^-1)`).join(' or ')}${levels.length > LISTED ? ` or ${levels.length - LISTED} more` : ''}: say which by a column id, or by label and repeat index.`)

export { namedBy, type Named }
