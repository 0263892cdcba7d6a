import { conventionalWavelength } from '@/lib/atomic/air'
import { LS_BITS, RIGOROUS_BITS } from '@/lib/atomic/rules'
import { effectiveGOfPair, pairMask } from '@/lib/catalogue/line-scan'
import type { Snapshot } from '@/lib/catalogue/snapshot'
import { vacuumNmOfWavenumber } from '@/lib/units/spectral'
import type { FieldNews, FollowedNews, LevelNews, LineNews, LinePosition } from '@/lib/mail/edition-mail'
import type { Level } from '@/openapi/schemas/level'

/** What one mail tells at most of one thing followed; the page of the edition tells the rest. */
const MOST_LEVELS = 30
const MOST_LINES = 8
/** Two positions that agree to this, in cm^-1, are the same: rounding of differences of energies. */
const SAME_INVCM = 1e-9

const numberText = (value: number | null, unit = ''): string => (value === null ? 'not known' : `${value}${unit}`)
/** Levels are told by the names that people use for values, each as text that shows every stored digit. */
const TOLD: readonly [string, (level: Level) => string][] = [
  ['energy', (level) => numberText(level.energy_invcm, ' cm^-1')],
  ['uncertainty of the energy', (level) => numberText(level.energy_unc_invcm, ' cm^-1')],
  ['digits of the source', (level) => level.energy_literal ?? 'none'],
  ['configuration', (level) => level.configuration],
  ['coupling', (level) => level.coupling],
  ['term', (level) => `${level.term.label ?? ''}${level.term.symbol}`],
  ['g_J adopted', (level) => (level.g_j.status === 'not_applicable' ? 'none (J = 0)' : `${numberText(level.g_j.adopted)} (${level.g_j.basis})`)],
  ['g_J measured', (level) => (level.g_j.all_measured.length === 0 ? 'none' : level.g_j.all_measured.map((one) => `${one.value}${one.unc === null ? '' : ` +- ${one.unc}`} [${one.source}]`).join(', '))],
  ['source of the energy', (level) => `${level.energy_source} (${level.energy_evidence})`],
  ['note', (level) => level.note ?? 'none'],
]

function fieldsBetween(before: Level, after: Level): FieldNews[] {
  return TOLD.flatMap(([name, text]) => {
    const [old, now] = [text(before), text(after)]
    return old === now ? [] : [{ name, before: old, after: now }]
  })
}

const isLine = (snapshot: Snapshot, a: number, b: number): boolean =>
  snapshot.columns.speciesOf[a] === snapshot.columns.speciesOf[b] && (pairMask(snapshot, 'E1', a, b) & (RIGOROUS_BITS | LS_BITS)) === 0

/** Where the line between two levels is, in an edition that holds both and in which they differ. */
function positionOf(snapshot: Snapshot, a: string, b: string): (LinePosition & { lower: string; upper: string }) | null {
  const [i, j] = [snapshot.indexOf(a), snapshot.indexOf(b)]
  if (i === undefined || j === undefined) return null
  const { energyInvcm } = snapshot.columns
  const [low, high] = (energyInvcm[i] ?? 0) <= (energyInvcm[j] ?? 0) ? [i, j] : [j, i]
  const wavenumber = (energyInvcm[high] ?? 0) - (energyInvcm[low] ?? 0)
  if (!(wavenumber > 0)) return null
  const { nm, medium } = conventionalWavelength(vacuumNmOfWavenumber(wavenumber))
  const g = effectiveGOfPair(snapshot, low, high)
  return { lower: snapshot.levelId(low), upper: snapshot.levelId(high), wavenumber, nm, medium, gEff: Number.isNaN(g) ? null : g }
}

/** A line before and after; null where it stayed as it was. */
export function lineNews(earlier: Snapshot, later: Snapshot, a: string, b: string): LineNews | null {
  const [before, after] = [positionOf(earlier, a, b), positionOf(later, a, b)]
  if (before === null && after === null) return null
  const named = after ?? before
  const moved = before === null || after === null || Math.abs(after.wavenumber - before.wavenumber) > SAME_INVCM
  if (!moved && before?.gEff === after?.gEff) return null
  return { id: `${named?.lower ?? a}~${named?.upper ?? b}`, before, after }
}

const moveOf = ({ before, after }: LineNews): number => (before === null || after === null ? Infinity : Math.abs(after.wavenumber - before.wavenumber))

/** Lines of a level that moved or whose g_eff changed, those that moved most first. */
function linesOf(earlier: Snapshot, later: Snapshot, id: string): LineNews[] {
  const index = later.indexOf(id)
  if (index === undefined || earlier.indexOf(id) === undefined) return []
  const [from, to] = later.speciesRange(later.columns.speciesOf[index] ?? 0)
  const lines: LineNews[] = []
  for (let other = from; other < to; other += 1) {
    if (other === index || !isLine(later, index, other)) continue
    const line = lineNews(earlier, later, id, later.levelId(other))
    // a line with an end that the earlier edition lacks is new, and no news of this level
    if (line !== null && line.before !== null && line.after !== null) lines.push(line)
  }
  return lines.sort((x, y) => moveOf(y) - moveOf(x) || (x.after?.wavenumber ?? 0) - (y.after?.wavenumber ?? 0))
}

/** What became of one level; null where nothing that is told of it changed. */
function levelNews(earlier: Snapshot, later: Snapshot, id: string, withLines: boolean): LevelNews | null {
  const [old, now] = [earlier.indexOf(id), later.indexOf(id)]
  if (now === undefined) {
    const gone = old === undefined ? undefined : later.retired(id)
    return gone === undefined ? null : { id, state: 'retired', fields: [], reason: gone.reason, successor: gone.successor, lines: [], moreLines: 0 }
  }
  if (old === undefined) return { id, state: 'new', fields: TOLD.slice(0, 1).concat(TOLD.slice(5, 7)).map(([name, text]) => ({ name, before: null, after: text(later.level(now)) })), reason: null, successor: null, lines: [], moreLines: 0 }
  const fields = fieldsBetween(earlier.level(old), later.level(now))
  if (fields.length === 0) return null
  const lines = withLines ? linesOf(earlier, later, id) : []
  return { id, state: 'changed', fields, reason: null, successor: null, lines: lines.slice(0, MOST_LINES), moreLines: Math.max(0, lines.length - MOST_LINES) }
}

/** Active levels of a species in either edition, in the order of their ordinals. */
function levelsOf(earlier: Snapshot, later: Snapshot, species: string): string[] {
  const ids = new Set<string>()
  for (const snapshot of [earlier, later]) {
    const index = snapshot.speciesIndex.get(species)
    if (index === undefined) continue
    const [from, to] = snapshot.speciesRange(index)
    for (let i = from; i < to; i += 1) ids.add(snapshot.levelId(i))
  }
  const ordinal = (id: string): number => Number(id.slice(id.lastIndexOf('.') + 1))
  return [...ids].sort((a, b) => ordinal(a) - ordinal(b))
}

const SPECIES_TOLD: readonly [string, (species: Snapshot['species'][number]) => string][] = [
  ['ionisation energy', (one) => numberText(one.ionisation_energy_invcm, ' cm^-1')],
  ['isotopes', (one) => one.isotopes.map((isotope) => JSON.stringify(isotope)).join(' ')],
]

function speciesFields(earlier: Snapshot, later: Snapshot, id: string): FieldNews[] {
  const [old, now] = [earlier, later].map((snapshot) => snapshot.species[snapshot.speciesIndex.get(id) ?? -1])
  if (old === undefined || now === undefined) return []
  return SPECIES_TOLD.flatMap(([name, text]): FieldNews[] => {
    if (text(old) === text(now)) return []
    return name === 'isotopes' ? [{ name, before: null, after: 'changed; see the page of the species' }] : [{ name, before: text(old), after: text(now) }]
  })
}

/** News of things followed between two editions; each thing is looked at once, whoever follows it. */
export class News {
  private readonly known = new Map<string, FollowedNews | null>()

  constructor(private readonly earlier: Snapshot, private readonly later: Snapshot) {}

  of(kind: FollowedNews['kind'], subject: string): FollowedNews | null {
    const name = `${kind} ${subject}`
    let news = this.known.get(name)
    if (news === undefined) this.known.set(name, (news = this.look(kind, subject)))
    return news
  }

  private look(kind: FollowedNews['kind'], subject: string): FollowedNews | null {
    const { earlier, later } = this
    if (kind === 'level') {
      const level = levelNews(earlier, later, subject, true)
      return level === null ? null : { kind, subject, fields: [], levels: [level], moreLevels: 0, line: null }
    }
    if (kind === 'line') {
      const [a = '', b = ''] = subject.split('~')
      const levels = [a, b].flatMap((id) => levelNews(earlier, later, id, false) ?? [])
      return levels.length === 0 ? null : { kind, subject, fields: [], levels, moreLevels: 0, line: lineNews(earlier, later, a, b) }
    }
    const fields = speciesFields(earlier, later, subject)
    const changed = levelsOf(earlier, later, subject).filter((id) => levelNews(earlier, later, id, false) !== null)
    const levels = changed.slice(0, MOST_LEVELS).flatMap((id) => levelNews(earlier, later, id, true) ?? [])
    return fields.length === 0 && levels.length === 0 ? null : { kind, subject, fields, levels, moreLevels: changed.length - levels.length, line: null }
  }
}
