import { setImmediate as pause } from 'node:timers/promises'
import { conventionalWavelength } from '@/lib/atomic/air'
import { LS_BITS, RIGOROUS_BITS } from '@/lib/atomic/rules'
import { effectiveGOfPair, pairMask } from '@/lib/catalogue/line-scan'
import type { Snapshot } from '@/lib/catalogue/snapshot'
import type { FollowedNews, LevelNews, LineNews, LinePosition } from '@/lib/mail/edition-mail'
import { fieldNews } from '@/lib/notices/news-words'
import type { Difference } from '@/lib/prediction/comparison'
import { vacuumNmOfWavenumber } from '@/lib/units/spectral'
import type { Change } from '@/openapi/schemas/edition'

/** What one mail tells at most of one thing followed; the comparison of the editions tells the rest. */
const MOST_LEVELS = 50
const MOST_LINES = 8
/** Isotopes and the like of one species; more than any element has. */
const MOST_OTHERS = 100
/** Two positions that agree to this, in cm^-1, are the same: rounding of differences of energies. */
const SAME_INVCM = 1e-9

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

/** All that two editions show otherwise, and how to learn the fields of some of it. */
export interface Comparison { differences: readonly Difference[]; describe: (some: readonly Difference[]) => Promise<readonly Change[]> }

type State = LevelNews['state']
const stateOf = (of: readonly Pick<Difference, 'kind' | 'action'>[]): State => {
  const action = of.find(({ kind }) => kind === 'level')?.action
  return action === 'created' ? 'new' : action === 'retired' || action === 'absent' ? 'retired' : 'changed'
}

/** What differs of levels, each with its hyperfine constants, and of species beside their levels. */
class Differences {
  readonly ofLevel = new Map<string, Difference[]>()
  readonly levelsOf = new Map<string, string[]>()
  readonly ofSpecies = new Map<string, Difference[]>()

  constructor(differences: readonly Difference[]) {
    for (const one of differences) {
      if (one.species === null) continue
      if (one.kind !== 'level' && one.kind !== 'hyperfine') {
        const known = this.ofSpecies.get(one.species)
        if (known === undefined) this.ofSpecies.set(one.species, [one])
        else known.push(one)
        continue
      }
      const level = one.kind === 'level' ? one.subject : one.subject.slice(0, one.subject.indexOf('/'))
      const known = this.ofLevel.get(level)
      if (known !== undefined) known.push(one)
      else {
        this.ofLevel.set(level, [one])
        const levels = this.levelsOf.get(one.species)
        if (levels === undefined) this.levelsOf.set(one.species, [level])
        else levels.push(level)
      }
    }
  }
}

/** News of things followed between two editions; each thing is looked at once, whoever follows it. */
export class News {
  private readonly known = new Map<string, Promise<FollowedNews | null>>()
  private readonly differences: Differences

  constructor(private readonly earlier: Snapshot, private readonly later: Snapshot, private readonly comparison: Comparison) {
    this.differences = new Differences(comparison.differences)
  }

  of(kind: FollowedNews['kind'], subject: string): Promise<FollowedNews | null> {
    const name = `${kind} ${subject}`
    let news = this.known.get(name)
    if (news === undefined) this.known.set(name, (news = this.look(kind, subject)))
    return news
  }

  private async look(kind: FollowedNews['kind'], subject: string): Promise<FollowedNews | null> {
    if (kind === 'species') return this.speciesNews(subject)
    const ends = kind === 'line' ? subject.split('~') : [subject]
    const levels = await this.levelNews(ends, kind === 'level')
    if (levels.length === 0) return null
    return { kind, subject, fields: [], levels, moreLevels: {}, line: kind === 'line' ? lineNews(this.earlier, this.later, ends[0] ?? '', ends[1] ?? '') : null }
  }

  private async speciesNews(subject: string): Promise<FollowedNews | null> {
    const own = (this.differences.ofSpecies.get(subject) ?? []).slice(0, MOST_OTHERS)
    const ordinal = (id: string): number => Number(id.slice(id.lastIndexOf('.') + 1))
    const changed = [...(this.differences.levelsOf.get(subject) ?? [])].sort((a, b) => ordinal(a) - ordinal(b))
    const fields = own.length === 0 ? [] : (await this.comparison.describe(own)).flatMap(fieldNews)
    const levels = await this.levelNews(changed.slice(0, MOST_LEVELS), true)
    if (fields.length === 0 && levels.length === 0) return null
    const moreLevels: FollowedNews['moreLevels'] = {}
    for (const id of changed.slice(MOST_LEVELS)) {
      const state = stateOf(this.differences.ofLevel.get(id) ?? [])
      moreLevels[state] = (moreLevels[state] ?? 0) + 1
    }
    return { kind: 'species', subject, fields, levels, moreLevels, line: null }
  }

  /** What became of some levels and of their hyperfine constants; those of which nothing changed are left out. */
  private async levelNews(ids: readonly string[], withLines: boolean): Promise<LevelNews[]> {
    const differences = ids.flatMap((id) => this.differences.ofLevel.get(id) ?? [])
    if (differences.length === 0) return []
    const described = await this.comparison.describe(differences)
    const news: LevelNews[] = []
    for (const id of new Set(ids)) {
      const changes = described.filter(({ level }) => level === id)
      if (changes.length === 0) continue
      const state = stateOf(changes)
      const gone = state === 'retired' ? this.later.retired(id) : undefined
      const fields = changes.flatMap((change) => (state === 'retired' && change.kind === 'level' ? [] : fieldNews(change)))
      // the lines of a level of a large species take a while, and this process answers requests too
      await pause()
      const lines = withLines && state === 'changed' && changes.some(({ kind }) => kind === 'level') ? linesOf(this.earlier, this.later, id) : []
      news.push({ id, state, fields, reason: gone?.reason ?? null, successor: gone?.successor ?? null, lines: lines.slice(0, MOST_LINES), moreLines: Math.max(0, lines.length - MOST_LINES) })
    }
    return news
  }
}
