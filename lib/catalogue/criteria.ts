import type { Term } from '@/lib/atomic/term'
import { fold, searchIndex, withoutParents } from '@/lib/catalogue/search-index'
import type { Snapshot } from '@/lib/catalogue/shape'

/** A configuration looked for, in canonical form. Parents left out match any parents. */
export interface ConfigurationWanted {
  readonly canonical: string
  /** `whole`: the level's configuration is it; `part`: it contains these shells side by side. */
  readonly match: 'whole' | 'part'
}

/** A bound on a number; `open` leaves the bound itself out. */
export interface Bound {
  readonly value: number
  readonly open?: boolean
}

/** What a level must be. All members given must hold; of a list, any one. */
export interface LevelCriteria {
  /** Indices of species. */
  readonly species?: ReadonlySet<number>
  readonly terms?: readonly Term[]
  readonly twoS?: number
  readonly l?: number
  readonly twoJ?: readonly number[]
  readonly parity?: 'even' | 'odd'
  readonly configurations?: readonly ConfigurationWanted[]
  readonly energyMin?: number
  readonly energyMax?: number
  readonly gMin?: Bound
  readonly gMax?: Bound
  readonly source?: string
  /** Indices of levels. */
  readonly levels?: ReadonlySet<number>
  /** Paschen or other second name, folded. */
  readonly alternativeName?: string
  /** Words, each of which must stand in the level's configuration, symbol, species, second name or note. */
  readonly words?: readonly string[]
}

export type Test = (index: number) => boolean

/** Why a level that is otherwise wanted is not in the list. */
export type LevelExclusion = 'retired' | 'g_not_known' | 'g_not_applicable' | 's_l_not_applicable'

/** Which of the distinct configurations are the one wanted: 1 at their numbers. */
function matchesOf(snapshot: Snapshot, { canonical, match }: ConfigurationWanted): Uint8Array {
  const index = searchIndex(snapshot)
  return index.remembered.get(`configuration ${match} ${canonical}`, () => {
    const withParents = canonical.includes('(')
    if (match === 'whole') return Uint8Array.from(withParents ? index.configurations : index.shells, (text) => (text === canonical ? 1 : 0))
    const within = `.${canonical}.`
    return Uint8Array.from(withParents ? index.dottedConfigurations : index.dottedShells, (text) => (text.includes(within) ? 1 : 0))
  })
}

/** Whether any level, of the species given where any are, has the configuration. */
export function configurationOccurs(snapshot: Snapshot, wanted: ConfigurationWanted, species: ReadonlySet<number>): boolean {
  const matches = matchesOf(snapshot, wanted)
  if (species.size === 0) return matches.includes(1)
  const { configurationNumber } = searchIndex(snapshot)
  for (const one of species) {
    const [from, to] = snapshot.speciesRange(one)
    for (let i = from; i < to; i += 1) if (matches[configurationNumber[i] ?? 0] === 1) return true
  }
  return false
}

function configurationTest(snapshot: Snapshot, wanted: readonly ConfigurationWanted[]): Test {
  const index = searchIndex(snapshot)
  const { configurationNumber } = index
  const lists = wanted.map((one) => matchesOf(snapshot, one))
  const plain: Test = lists.length === 1 ? (i) => lists[0]![configurationNumber[i]!] === 1 : (i) => lists.some((matches) => matches[configurationNumber[i]!] === 1)
  const withCore = wanted.filter(({ canonical }) => canonical.startsWith('['))
  if (withCore.length === 0) return plain
  return (i) => {
    if (plain(i)) return true
    const number = configurationNumber[i] ?? 0
    const core = snapshot.species[snapshot.columns.speciesOf[i] ?? 0]?.core_configuration ?? ''
    return withCore.some(({ canonical }) => canonical === `${core}.${(canonical.includes('(') ? index.configurations : index.shells)[number] ?? ''}`)
  }
}

function termTest(snapshot: Snapshot, term: Term): Test {
  const { twoS, l, twoJ, parity, lsNamed } = snapshot.columns
  const parityCode = term.parity === null ? -1 : term.parity === 'odd' ? 1 : 0
  const common = (i: number): boolean =>
    (parityCode < 0 || parity[i] === parityCode) && (term.twoJ === null || twoJ[i] === term.twoJ) && (term.label === null || snapshot.labelOf(i) === term.label)
  if (term.kind === 'LS') return (i) => lsNamed[i] === 1 && twoS[i] === term.twoS && l[i] === term.l && common(i)
  if (term.kind === 'J1K') return (i) => lsNamed[i] === 0 && snapshot.twoKOf(i) === term.twoK && snapshot.couplingOf(i) === 'J1K' && common(i)
  return (i) => {
    if (lsNamed[i] === 1 || snapshot.couplingOf(i) !== 'jj' || !common(i)) return false
    const { core, j_outer } = snapshot.level(i).term
    return core !== undefined && 2 * core.j === term.twoJ1 && 2 * (j_outer ?? -1) === term.twoJ2
  }
}

/** Places of `word` in folded text: at the start of the text or after something that is no letter, so that `1s` is not found in `11s`. */
function standsIn(text: string, word: string): boolean {
  let at = text.indexOf(word)
  while (at >= 0) {
    const before = at === 0 ? ' ' : text[at - 1]!
    if (!/[\p{L}\p{N}]/u.test(before) || !/^[\p{L}\p{N}]/u.test(word)) return true
    at = text.indexOf(word, at + 1)
  }
  return false
}

interface WordFinder {
  readonly test: Test
  /** Whether any level mentions the word at all. */
  readonly occurs: boolean
}

const wordFinder = (snapshot: Snapshot, word: string): WordFinder => searchIndex(snapshot).remembered.get(`word ${fold(word)}`, () => findWord(snapshot, fold(word)))

function findWord(snapshot: Snapshot, folded: string): WordFinder {
  const index = searchIndex(snapshot)
  const inConfiguration = Uint8Array.from(index.foldedConfigurations, (text) => (standsIn(text, folded) ? 1 : 0))
  const inSymbol = Uint8Array.from(index.symbols, (text) => (standsIn(text, folded) ? 1 : 0))
  const inSpecies = Uint8Array.from(snapshot.species, ({ id, name, element, stage }) => ([id, name, `${element} ${stage}`].some((text) => standsIn(fold(text), folded)) ? 1 : 0))
  const remarked = new Set<number>()
  for (const [i, text] of index.remarks) if (standsIn(text, folded)) remarked.add(i)
  return {
    test: (i) =>
      inConfiguration[index.configurationNumber[i] ?? 0] === 1 ||
      inSymbol[index.symbolNumber[i] ?? 0] === 1 ||
      inSpecies[snapshot.columns.speciesOf[i] ?? 0] === 1 ||
      remarked.has(i),
    occurs: remarked.size > 0 || [inConfiguration, inSymbol, inSpecies].some((list) => list.includes(1)),
  }
}

/** Whether any level, species or note mentions a word: what the search box says of words it does not know. */
export const wordOccurs = (snapshot: Snapshot, word: string): boolean => wordFinder(snapshot, word).occurs

/** All tests but those on g and on S and L, whose unknown values are told apart from mismatches. */
function plainTests(snapshot: Snapshot, criteria: LevelCriteria): Test[] {
  const { speciesOf, energyInvcm, twoJ, parity } = snapshot.columns
  const tests: Test[] = []
  const { species, levels, configurations, terms, twoJ: twoJs, energyMin, energyMax, source, alternativeName, words } = criteria
  if (levels) tests.push((i) => levels.has(i))
  if (species) tests.push((i) => species.has(speciesOf[i] ?? 0))
  if (criteria.parity !== undefined) {
    const code = criteria.parity === 'odd' ? 1 : 0
    tests.push((i) => parity[i] === code)
  }
  if (twoJs) tests.push((i) => twoJs.includes(twoJ[i] ?? -1))
  if (energyMin !== undefined) tests.push((i) => (energyInvcm[i] ?? Number.NaN) >= energyMin)
  if (energyMax !== undefined) tests.push((i) => (energyInvcm[i] ?? Number.NaN) <= energyMax)
  if (terms) {
    const any = terms.map((term) => termTest(snapshot, term))
    tests.push((i) => any.some((test) => test(i)))
  }
  if (configurations) tests.push(configurationTest(snapshot, configurations))
  if (source !== undefined) tests.push((i) => snapshot.restsOn(i, source))
  if (alternativeName !== undefined) {
    const { secondNames } = searchIndex(snapshot)
    tests.push((i) => secondNames.get(i) === alternativeName)
  }
  for (const word of words ?? []) tests.push(wordFinder(snapshot, word).test)
  return tests
}

const within = (value: number, { gMin, gMax }: LevelCriteria): boolean =>
  (gMin === undefined || (gMin.open ? value > gMin.value : value >= gMin.value)) && (gMax === undefined || (gMax.open ? value < gMax.value : value <= gMax.value))

/** The verdict on one level: wanted, not wanted, or left out for a reason that has to be told. */
export type LevelVerdict = (index: number) => 'in' | 'out' | LevelExclusion

/**
 * Makes the test of a level from criteria. A value that is not known never matches: a level without g fails any bound on g,
 * one without S and L any wish for S or L, and is then reported by the reason rather than dropped in silence.
 */
export function levelVerdict(snapshot: Snapshot, criteria: LevelCriteria): LevelVerdict {
  const tests = plainTests(snapshot, criteria)
  const { twoS, l, lsNamed, gAdopted, twoJ } = snapshot.columns
  const asksG = criteria.gMin !== undefined || criteria.gMax !== undefined
  const asksSl = criteria.twoS !== undefined || criteria.l !== undefined
  return (i) => {
    for (const test of tests) if (!test(i)) return 'out'
    let missing: LevelExclusion | null = null
    if (asksSl) {
      if (lsNamed[i] !== 1) missing = 's_l_not_applicable'
      else if ((criteria.twoS !== undefined && twoS[i] !== criteria.twoS) || (criteria.l !== undefined && l[i] !== criteria.l)) return 'out'
    }
    if (asksG) {
      const g = gAdopted[i] ?? Number.NaN
      if (Number.isNaN(g)) missing ??= twoJ[i] === 0 ? 'g_not_applicable' : 'g_not_known'
      else if (!within(g, criteria)) return 'out'
    }
    // retired ones are told only where they would have been listed
    if (i >= snapshot.size) return missing === null ? 'retired' : 'out'
    return missing ?? 'in'
  }
}

/** A configuration looked for as a whole, from its canonical form. */
export const wholeConfiguration = (canonical: string): ConfigurationWanted => ({ canonical: canonical.includes('(') ? canonical : withoutParents(canonical), match: 'whole' })
