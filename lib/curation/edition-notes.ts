import type { ChangeAction, ChangeKind } from '@/openapi/schemas/change'
import type { AnyRow, LevelRow } from './rows'
import { differences, printLevelTerm } from './values'

/** One change as the notes tell of it. */
export interface NotedChange { id: string; kind: ChangeKind; action: ChangeAction; subject: string; reason: string | null; successor: string | null }

/** Its values, looked up for the few that are told one by one. */
export interface ValuesOf { before: (change: NotedChange) => AnyRow | null; after: (change: NotedChange) => AnyRow | null }

/** Bounds of what is told one by one; the rest is counted. */
const LINES_PER_SPECIES = 12
/** New levels say little one by one: a few are told where there are many. */
const NEW_TOLD = 4
const LINES_IN_ALL = 120
const SPECIES_TOLD = 40
const NAMES_TOLD = 12

const plural = (n: number, one: string, many = `${one}s`): string => `${n} ${n === 1 ? one : many}`
const listed = (names: readonly string[]): string => (names.length <= NAMES_TOLD ? names.join(', ') : `${names.slice(0, NAMES_TOLD).join(', ')} and ${names.length - NAMES_TOLD} more`)
/** A number with a true minus sign; a difference has its sign always. */
const printed = (value: number): string => String(value).replace('-', '\u2212')
const shift = (value: number): string => `${value < 0 ? '\u2212' : '+'}${Number(Math.abs(value).toPrecision(6))}`

const levelOf = (row: AnyRow | null): LevelRow | null => row as LevelRow | null
const RAISED = '\u2070\u00b9\u00b2\u00b3\u2074\u2075\u2076\u2077\u2078\u2079'
const LOWERED: Record<string, string> = Object.fromEntries([...'0123456789'].map((digit, at) => [digit, String.fromCharCode(0x2080 + at)]))

/** A term as it is set in running text: `2P*3/2` is ²P°₃/₂. */
const setTerm = (symbol: string): string =>
  symbol.replace(/^((?:[A-Za-z]{1,4} )?)(\d*)(\S*?)(\*?)(\d+(?:\/2)?)$/, (_, label: string, multiplicity: string, letter: string, odd: string, j: string) =>
    `${label}${[...multiplicity].map((digit) => RAISED[Number(digit)] ?? '').join('')}${letter}${odd === '*' ? '\u00b0' : ''}${[...j].map((sign) => LOWERED[sign] ?? sign).join('')}`)

const named = (row: LevelRow): string => `${row.configuration} ${row.coupling === 'LS' ? setTerm(printLevelTerm(row)) : printLevelTerm(row)}`

/** What a correction changes, in words: the energy with both values, the rest by name. */
function corrected(subject: string, before: LevelRow | null, after: LevelRow): string {
  const parts: string[] = []
  if (before !== null && before.energyInvcm !== after.energyInvcm) {
    parts.push(`${before.energyLiteral ?? printed(before.energyInvcm)} \u2192 ${after.energyLiteral ?? printed(after.energyInvcm)} cm\u207b\u00b9 (${shift(after.energyInvcm - before.energyInvcm)})`)
  }
  const told = new Set(['energy_invcm', 'energy_literal'])
  const others = differences('level', before, after).map(({ field }) => field).filter((field) => !told.has(field) || parts.length === 0)
  if (others.length > 0) parts.push(`${parts.length > 0 ? 'also ' : ''}${others.map((field) => field.replaceAll('_', ' ').replace(' invcm', '')).join(', ')}`)
  return `- ${subject} ${named(after)}: ${parts.length > 0 ? parts.join('; ') : 'entered again, no value differs'}`
}

function levelLine(change: NotedChange, values: ValuesOf): string {
  const { action, subject, reason, successor } = change
  const [was, is] = [levelOf(values.before(change)), levelOf(values.after(change))]
  if (action === 'retire') return `- ${subject}${was === null ? '' : ` ${named(was)}`} retired${reason ? `: ${reason.replaceAll(/\s+/g, ' ').slice(0, 300)}` : ''}${successor === null ? '' : ` (${successor} takes its place)`}`
  if (is === null) return `- ${subject}`
  if (action === 'create') return `- ${subject} ${named(is)} new, at ${is.energyLiteral ?? printed(is.energyInvcm)} cm\u207b\u00b9`
  return corrected(subject, was, is)
}

const spoken: Record<ChangeAction, string> = { replace: 'corrected', create: 'new', retire: 'retired' }

/** `2 levels corrected, 1 new, 1 retired`. */
function levelCounts(changes: readonly NotedChange[]): string {
  let first = true
  return (['replace', 'create', 'retire'] as const).flatMap((action) => {
    const n = changes.filter((change) => change.action === action).length
    if (n === 0) return []
    const text = first ? `${plural(n, 'level')} ${spoken[action]}` : `${n} ${spoken[action]}`
    first = false
    return [text]
  }).join(', ')
}

const speciesOf = (subject: string): string => /^[^./]+/.exec(subject)?.[0] ?? subject
const spokenSpecies = (id: string): string => id.replace('-', ' ')

function speciesPart(id: string, changes: readonly NotedChange[], lines: number, values: ValuesOf): string[] {
  const levels = changes.filter(({ kind }) => kind === 'level')
  const head = [
    ...changes.filter(({ kind }) => kind === 'species').map(({ action }) => (action === 'create' ? 'new species' : 'species data corrected')),
    ...(levels.length > 0 ? [levelCounts(levels)] : []),
    ...(['isotope', 'hyperfine'] as const).flatMap((kind) => {
      const some = changes.filter((change) => change.kind === kind)
      const what = kind === 'isotope' ? 'isotope' : 'set of hyperfine constants'
      const many = kind === 'isotope' ? 'isotopes' : 'sets of hyperfine constants'
      return (['create', 'replace'] as const).flatMap((action) => {
        const n = some.filter((change) => change.action === action).length
        return n === 0 ? [] : [`${plural(n, what, many)} ${action === 'create' ? 'added' : 'corrected'}`]
      })
    }),
  ]
  const fresh = levels.filter(({ action }) => action === 'create')
  const old = levels.filter(({ action }) => action !== 'create')
  const told = [...old, ...fresh.slice(0, fresh.length > LINES_PER_SPECIES ? NEW_TOLD : fresh.length)].slice(0, lines).map((change) => levelLine(change, values))
  return [`${spokenSpecies(id)}: ${head.join(', ')}.`, ...told, ...(lines > 0 && levels.length > told.length ? [`- and ${plural(levels.length - told.length, 'more level')}`] : [])]
}

/**
 * Notes of an edition, written from its changes: species by species in alphabetical order, each level with its old and new energy; then the sources.
 * Bounded: what is beyond it is counted.
 */
export function editionNotes(changes: readonly NotedChange[], values: ValuesOf, amendments: readonly string[]): string {
  const bySpecies = new Map<string, NotedChange[]>()
  for (const change of changes) {
    if (change.kind === 'source') continue
    const id = speciesOf(change.subject)
    const list = bySpecies.get(id)
    if (list === undefined) bySpecies.set(id, [change])
    else list.push(change)
  }
  const ordered = [...bySpecies].sort(([a], [b]) => (a < b ? -1 : 1))
  const told = ordered.slice(0, SPECIES_TOLD)
  let left = LINES_IN_ALL
  const parts: string[] = []
  if (amendments.length > 0) parts.push(`From ${plural(amendments.length, 'amendment')}: ${listed(amendments)}.`)
  for (const [id, list] of told) {
    const part = speciesPart(id, list, Math.max(0, Math.min(LINES_PER_SPECIES, left)), values)
    left -= part.length - 1
    parts.push(part.join('\n'))
  }
  const rest = ordered.slice(SPECIES_TOLD)
  if (rest.length > 0) parts.push(`${plural(rest.length, 'more species', 'more species')}: ${levelCounts(rest.flatMap(([, list]) => list.filter(({ kind }) => kind === 'level'))) || 'other data'}.`)
  const sources = (action: ChangeAction) => changes.filter((change) => change.kind === 'source' && change.action === action).map(({ subject }) => subject).sort()
  if (sources('create').length > 0) parts.push(`Sources added: ${listed(sources('create'))}.`)
  if (sources('replace').length > 0) parts.push(`Sources corrected: ${listed(sources('replace'))}.`)
  return parts.join('\n\n').slice(0, 15_000)
}
