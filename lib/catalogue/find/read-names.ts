import { parseConfiguration } from '@/lib/atomic/configuration'
import { RIGOROUS_BITS } from '@/lib/atomic/rules'
import { parseTerm } from '@/lib/atomic/term'
import { levelVerdict, type LevelCriteria } from '@/lib/catalogue/criteria'
import { inLineOrder, type Line, lineId, lineOf } from '@/lib/catalogue/lines'
import { pairMask } from '@/lib/catalogue/line-scan'
import { fold, searchIndex } from '@/lib/catalogue/search-index'
import type { Snapshot } from '@/lib/catalogue/shape'
import { readQuantity } from '@/lib/catalogue/find/read-quantity'
import { type EndPattern, TRADE_NAMES, type TradeName } from '@/lib/catalogue/find/trade-names'
import { addTo, type ReadPart, type Reader, type Reading, stretch } from '@/lib/catalogue/find/wish'
import { squash, withStretch } from '@/lib/catalogue/find/words'
import { LEVEL_ID, TRANSITION_ID } from '@/openapi/schemas/common'

interface Alias {
  readonly row: TradeName
  /** As typed in the table; a name of several words is matched by one run-together word only with a capital. */
  readonly spaced: boolean
}

const ALIASES = new Map<string, Alias[]>()
for (const row of TRADE_NAMES) {
  for (const name of row.names) {
    const key = squash(name)
    const list = ALIASES.get(key) ?? []
    if (!list.some((alias) => alias.row === row)) list.push({ row, spaced: name.includes(' ') })
    ALIASES.set(key, list)
  }
}
const LONGEST_NAME = 6

/** Levels of a species that fit one end of a named line. */
function endLevels(snapshot: Snapshot, species: number, pattern: EndPattern): number[] {
  const terms = pattern.terms?.flatMap((text) => {
    const term = parseTerm(text)
    return term.ok ? [term.value] : []
  })
  const criteria: LevelCriteria = {
    species: new Set([species]),
    ...(terms ? { terms } : {}),
    ...(pattern.configurations ? { configurations: pattern.configurations.map((canonical) => ({ canonical, match: 'whole' as const })) } : {}),
    ...(pattern.name === undefined ? {} : { alternativeName: pattern.name }),
  }
  const verdict = levelVerdict(snapshot, criteria)
  const [from, to] = snapshot.speciesRange(species)
  const found: number[] = []
  for (let i = from; i < to; i += 1) if (verdict(i) === 'in') found.push(i)
  return found
}

/** The lines that a name stands for in an edition: dipole lines that the rigorous rules allow between its two ends. */
export function linesOfName(snapshot: Snapshot, row: TradeName): Line[] {
  const species = snapshot.speciesIndex.get(row.species)
  if (species === undefined) return []
  const energy = snapshot.columns.energyInvcm
  const [lowers, uppers] = [endLevels(snapshot, species, row.lower), endLevels(snapshot, species, row.upper)]
  const lines: Line[] = []
  for (const a of lowers) {
    for (const b of uppers) {
      const wavenumberInvcm = (energy[b] ?? 0) - (energy[a] ?? 0)
      if (wavenumberInvcm > 0 && (pairMask(snapshot, 'E1', a, b) & RIGOROUS_BITS) === 0) lines.push({ lower: a, upper: b, wavenumberInvcm })
    }
  }
  return lines.sort(inLineOrder)
}

const levelText = (snapshot: Snapshot, i: number): string => `${snapshot.configurationOf(i)} ${snapshot.level(i).term.unicode}`

function describe(snapshot: Snapshot, row: TradeName, lines: readonly Line[]): string {
  const [first] = lines
  const species = row.species.replace('-', ' ')
  if (!first) return `${row.title} (common practice): ${species} holds no such line in this edition`
  if (lines.length > 1) return `${row.title} (common practice): ${lines.length} lines of ${species}`
  return `${row.title} (common practice): ${species} ${levelText(snapshot, first.lower)} – ${levelText(snapshot, first.upper)}`
}

/** The rows a name means: with a species named elsewhere in the query, that species' line of the name where there is one. */
function rowsFor(reading: Reading, key: string, aliases: readonly Alias[]): TradeName[] {
  const symbols = [...reading.speciesNamed].map((index) => reading.snapshot.species[index]?.element ?? '')
  const bySpecies = symbols.flatMap((symbol) => (ALIASES.get(squash(symbol) + key) ?? []).map(({ row }) => row))
  const rows = bySpecies.length > 0 ? bySpecies : aliases.map(({ row }) => row)
  return [...new Set(rows)]
}

/** Names of lines: D1, H-alpha, Mg b, Ca K, He 1083, the green mercury line. */
export const readTradeName: Reader = (reading, at) => {
  for (let next = Math.min(at + LONGEST_NAME, reading.words.length); next > at; next -= 1) {
    const text = stretch(reading, at, next)
    const key = squash(text)
    const aliases = (ALIASES.get(key) ?? []).filter(({ spaced }) => !spaced || next > at + 1 || /^[A-Z].*[A-Z0-9]/.test(text))
    if (aliases.length === 0) continue
    // "He 1083 nm" is a wavelength; "He 1083" is the name
    if (/^\d/.test(reading.words[next - 1]?.text ?? '') && readQuantity(reading, next - 1) !== null) continue
    const rows = rowsFor(reading, key, aliases)
    const named = rows.map((row) => ({ row, lines: linesOfName(reading.snapshot, row) }))
    return {
      next,
      kind: 'line_name',
      meaning: named.map(({ row, lines }) => describe(reading.snapshot, row, lines)).join('; '),
      apply: (wish) => void (wish.lines = [...(wish.lines ?? []), ...named.flatMap(({ lines }) => lines)]),
    }
  }
  return null
}

/** Identifiers of levels and transitions: `Na-I.3`, `Na-I.1~Na-I.3`. */
export const readIdentifier: Reader = ({ snapshot, words }, at) => {
  const text = words[at]?.text ?? ''
  if (TRANSITION_ID.test(text)) {
    const line = lineOf(snapshot, text)
    if (line === null) return { next: at + 1, kind: 'level_id', meaning: `transition ${text}: no such pair of levels in this edition`, apply: (wish) => void (wish.lines = wish.lines ?? []) }
    if (line.wavenumberInvcm === 0) return { next: at + 1, kind: 'level_id', meaning: `transition ${text}: the two levels have equal energies, so there is no line`, apply: (wish) => void (wish.lines = wish.lines ?? []) }
    return { next: at + 1, kind: 'level_id', meaning: `transition ${lineId(snapshot, line.lower, line.upper)}`, apply: (wish) => void (wish.lines = [...(wish.lines ?? []), line]) }
  }
  if (!LEVEL_ID.test(text)) return null
  const index = snapshot.indexOf(text)
  if (index !== undefined) return { next: at + 1, kind: 'level_id', meaning: `level ${text}: ${levelText(snapshot, index)}`, apply: (wish) => void (wish.levels = addTo(wish.levels, [index])) }
  const gone = snapshot.retired(text)
  const meaning = gone ? `level ${text}: retired in edition ${gone.edition}${gone.successor === null ? '' : `, see ${gone.successor}`}` : `level ${text}: not in this edition`
  return { next: at + 1, kind: 'level_id', meaning, apply: (wish) => void (wish.levels = addTo(wish.levels, [])) }
}

const PASCHEN = /^\d{1,2}[spdf]\d{1,2}$/

function namedLevels({ snapshot, speciesNamed }: Reading, name: string): number[] {
  const found: number[] = []
  for (const [i, second] of searchIndex(snapshot).secondNames) {
    if (second === name && i < snapshot.size && (speciesNamed.size === 0 || speciesNamed.has(snapshot.columns.speciesOf[i] ?? 0))) found.push(i)
  }
  return found
}

/** Levels whose configuration contains a shell text, among the species named. */
function withShells({ snapshot, speciesNamed }: Reading, text: string): number[] {
  if (!parseConfiguration(text).ok) return []
  const verdict = levelVerdict(snapshot, { configurations: [{ canonical: text, match: 'part' }], ...(speciesNamed.size > 0 ? { species: speciesNamed } : {}) })
  const found: number[] = []
  for (let i = 0; i < snapshot.size; i += 1) if (verdict(i) === 'in') found.push(i)
  return found
}

const speciesList = (snapshot: Snapshot, levels: readonly number[]): string =>
  [...new Set(levels.map((i) => snapshot.species[snapshot.columns.speciesOf[i] ?? 0]?.id.replace('-', ' ') ?? ''))].join(', ')

/** Whether a word could as well be a Paschen name; used by the reader of configurations to ask. */
export const isPaschenName = (reading: Reading, word: string): boolean => PASCHEN.test(word) && namedLevels(reading, fold(word)).length > 0

/** What to ask of a word such as `2p5`, which names a level of neon and a shell of its configurations. */
export function paschenQuestion({ query }: Reading, start: number, end: number, word: string) {
  return {
    text: `${word} is a Paschen name of a noble-gas level and a shell of electrons. Which is meant?`,
    options: [
      { label: `the level called ${word}`, q: withStretch(query, start, end, `Paschen ${word}`) },
      { label: `configurations with ${word}`, q: withStretch(query, start, end, `configuration ${word}`) },
    ],
  }
}

function paschenLine(reading: Reading, at: number, text: string): ReadPart | null {
  const [first, second, more] = text.split(/[-–—~]/)
  if (first === undefined || second === undefined || more !== undefined || !PASCHEN.test(first) || !PASCHEN.test(second)) return null
  const { snapshot } = reading
  const { energyInvcm, speciesOf } = snapshot.columns
  const lines: Line[] = []
  for (const a of namedLevels(reading, first)) {
    for (const b of namedLevels(reading, second)) {
      if (speciesOf[a] !== speciesOf[b] || energyInvcm[a] === energyInvcm[b]) continue
      const [lower, upper] = a < b ? [a, b] : [b, a]
      lines.push({ lower, upper, wavenumberInvcm: (energyInvcm[upper] ?? 0) - (energyInvcm[lower] ?? 0) })
    }
  }
  if (lines.length === 0) return null
  return {
    next: at + 1,
    kind: 'line_name',
    meaning: `lines between the levels called ${first} and ${second} (Paschen): ${speciesList(snapshot, lines.map(({ lower }) => lower))}`,
    apply: (wish) => void (wish.lines = [...(wish.lines ?? []), ...lines]),
  }
}

/** Paschen names of noble-gas levels: `1s5`, `2p10`, `Paschen 2p5`, and lines between two of them, `1s5-2p9`. */
export const readPaschen: Reader = (reading, at) => {
  const { snapshot, words, speciesNamed } = reading
  const keyword = /^paschen$/i.test(words[at]?.text ?? '')
  const word = words[keyword ? at + 1 : at]
  if (!word) return null
  const next = keyword ? at + 2 : at + 1
  const line = paschenLine(reading, next - 1, word.text)
  if (line) return line
  if (!PASCHEN.test(word.text)) return null
  const levels = namedLevels(reading, fold(word.text))
  if (levels.length === 0) {
    return keyword ? { next, kind: 'level_name', meaning: `Paschen name ${word.text}: no level here has it`, apply: (wish) => void (wish.levels = addTo(wish.levels, [])) } : null
  }
  const shells = keyword ? [] : withShells(reading, word.text)
  // without a noble gas in the query a shell that exists is the plainer reading; its reader asks about this one
  if (shells.length > 0 && speciesNamed.size === 0) return null
  const meaning = `level called ${word.text} (Paschen): ${speciesList(snapshot, levels)}`
  if (shells.length === 0) return { next, kind: 'level_name', meaning, apply: (wish) => void (wish.levels = addTo(wish.levels, levels)) }
  return {
    next,
    kind: 'level_name',
    meaning: `${meaning}; also levels with the shell ${word.text}`,
    apply: (wish) => {
      wish.levels = addTo(wish.levels, [...levels, ...shells])
      wish.favoured = addTo(wish.favoured, levels)
    },
    questions: [paschenQuestion(reading, word.start, word.end, word.text)],
  }
}
